import { existsSync, mkdtempSync, rmSync, truncateSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import * as XLSX from 'xlsx';
import { IntakeError, type ReadProgress } from '@/core/intake';
import { fileByteCap, readInChild } from '@/server/workers/fork-reader';

const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-reader-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

function fileOf(name: string, content: string | Uint8Array): string {
  const file = path.join(folder, name);
  writeFileSync(file, content);
  return file;
}

/** Two days of half-hours of an invented plant: 50 kWh each. */
function halfHours(): string {
  const rows = Array.from({ length: 96 }, (_, at) => {
    const stamp = new Date(Date.UTC(2025, 2, 3, 0, at * 30)).toISOString().slice(0, 16).replace('T', ' ');
    return `${stamp},50,20,0`;
  });
  return ['Time,kWh,Lagging kvarh,Leading kvarh', ...rows].join('\n');
}

const request = (name: string, content: string | Uint8Array) => ({
  kind: 'intervals' as const,
  path: fileOf(name, content),
  fileName: name,
  timeZone: 'Asia/Kolkata',
});

describe('readInChild', () => {
  it('brings typed arrays back from the child', async () => {
    const { load, report } = await readInChild({ ...request('good.csv', halfHours()), mode: 'read' });
    expect(load.kwh).toBeInstanceOf(Float64Array);
    expect(load.kwh).toHaveLength(96);
    // 96 half-hours of 50 kWh; 00:00 in Kolkata is 18:30 UTC of the day before.
    expect(report.totalKwh).toBe(4800);
    expect(new Date(load.startMs).toISOString()).toBe('2025-03-02T18:30:00.000Z');
  });

  it('previews without the load', async () => {
    const preview = await readInChild({ ...request('seen.csv', halfHours()), mode: 'preview' });
    expect(preview.problems).toEqual([]);
    expect(preview.rows.length).toBeLessThanOrEqual(12);
    expect(preview.columns.map((column) => column.takenAs)).toEqual([
      'stamp',
      'active',
      'reactive-lagging',
      'reactive-leading',
    ]);
  });

  it('reads bills', async () => {
    const table = 'From,To,kWh,Total\n2025-01-01,2025-02-01,1000,150.00\n2025-02-01,2025-03-01,900,140.00\n';
    const { bills } = await readInChild({ ...request('bills.csv', table), kind: 'bills', mode: 'read' });
    expect(bills.map((bill) => bill.quantities.kwh)).toEqual([1000, 900]);
  });

  it('hands on why a file is refused', async () => {
    const picture = new Uint8Array([0x89, 0x50, 0x4e, 0x47, 1, 2, 3]);
    const refused = readInChild({ ...request('photo.csv', picture), mode: 'read' });
    await expect(refused).rejects.toBeInstanceOf(IntakeError);
    await expect(refused).rejects.toThrow(/PNG picture/);
  });

  it('refuses a file beyond the cap before any child starts', async () => {
    const large = request('large.csv', '');
    truncateSync(large.path, fileByteCap + 1);
    await expect(readInChild({ ...large, mode: 'read' })).rejects.toThrow(/at most 128 MiB/);
  });

  it('stops a child that takes too long', async () => {
    const slow = readInChild({ ...request('slow.csv', halfHours()), mode: 'read' }, { timeoutMs: 5 });
    await expect(slow).rejects.toThrow(/took longer/);
  });

  it('survives a file that exhausts the memory of the child', async () => {
    const rows = Array.from({ length: 40_000 }, (_, row) =>
      Array.from({ length: 10 }, (_unused, column) => row * column + 0.5),
    );
    const book = XLSX.utils.book_new();
    XLSX.utils.book_append_sheet(book, XLSX.utils.aoa_to_sheet(rows), 'Readings');
    const bytes = new Uint8Array(XLSX.write(book, { type: 'array', bookType: 'xlsx' }) as ArrayBuffer);
    const outcome = readInChild({ ...request('heavy.xlsx', bytes), mode: 'read' }, { heapMegabytes: 40 });
    await expect(outcome).rejects.toThrow(/more memory than one file may have/);
    const after = await readInChild({ ...request('after.csv', halfHours()), mode: 'read' });
    expect(after.report.intervals).toBe(96);
  });

  it.skipIf(!existsSync('/proc/self/status'))(
    'stops a child whose memory outside the heap grows too large',
    async () => {
      const outcome = readInChild({ ...request('big.csv', halfHours()), mode: 'read' }, { residentMegabytes: 5 });
      await expect(outcome).rejects.toThrow(/more memory than one file may have/);
    },
  );

  it('tells how far it is', async () => {
    const told: ReadProgress[] = [];
    const limits = { onProgress: (progress: ReadProgress) => void told.push(progress) };
    await readInChild({ ...request('told.csv', halfHours()), mode: 'read' }, limits);
    expect(told[0]).toEqual({ unit: 'stages', done: 0, planned: 2 });
  });

  it('gives up when asked to, also while waiting for a place', async () => {
    const stop = new AbortController();
    const first = readInChild({ ...request('a.csv', halfHours()), mode: 'read' });
    const second = readInChild({ ...request('b.csv', halfHours()), mode: 'read' });
    const third = readInChild({ ...request('c.csv', halfHours()), mode: 'read' }, { signal: stop.signal });
    stop.abort(new Error('given up'));
    await expect(third).rejects.toThrow('given up');
    expect((await first).report.intervals).toBe(96);
    expect((await second).report.intervals).toBe(96);
  });
});
