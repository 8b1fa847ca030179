import { spawn, type ChildProcess } from 'node:child_process';
import { copyFileSync, mkdirSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';
import sqlite3 from 'sqlite3';
import { afterAll, describe, expect, it } from 'vitest';
import { sequelize } from '@/server/db/connection';
import { inTx } from '@/server/db/tx';
import { Intake } from '@/server/models/Intake';
import { buildEngagement, buildIntake } from '../setup/build';

const rounds = 50;
/** A year of UTC months, each with four channels. */
const wholeBlocks = 12 * 4;
const folder = mkdtempSync(path.join(tmpdir(), 'counterlag-kill-'));
const program = fileURLToPath(new URL('../setup/.keep-program.mjs', import.meta.url));

/** Bundled once: fifty programs would otherwise spend their time on loading some eighty files each. */
const bundle = () =>
  build({
    entryPoints: [fileURLToPath(new URL('../setup/keep-program.ts', import.meta.url))],
    outfile: program,
    bundle: true,
    platform: 'node',
    format: 'esm',
    external: ['sequelize', 'sqlite3', 'xlsx'],
    banner: { js: "import { createRequire } from 'node:module'; const require = createRequire(import.meta.url);" },
    logLevel: 'error',
  });

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
  rmSync(program, { force: true });
});

/** Numbers in [0, 1) that are the same on every run. */
function noise(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 48_271) % 2_147_483_647;
    return state / 2_147_483_647;
  };
}

/** A program at work on its own copy of the database, and the words it has said. */
class Keeper {
  private readonly said = new Set<string>();
  private readonly waiting = new Map<string, () => void>();
  private readonly ended: Promise<void>;
  private readonly child: ChildProcess;

  constructor(dataDir: string, intakeId: number) {
    this.child = spawn(process.execPath, [program, String(intakeId)], {
      env: {
        PATH: process.env.PATH,
        NODE_ENV: 'test',
        DATA_DIR: dataDir,
        SESSION_SECRET: 'a-secret-of-the-tests-of-enough-length',
        LOG_LEVEL: 'silent',
      },
      stdio: ['pipe', 'pipe', 'inherit'],
    });
    this.child.stdout?.on('data', (text: Buffer) => {
      for (const word of text.toString().trim().split('\n')) this.hear(word);
    });
    this.ended = new Promise((resolve) => {
      this.child.once('close', () => {
        for (const go of this.waiting.values()) go();
        resolve();
      });
    });
  }

  private hear(word: string): void {
    this.said.add(word);
    this.waiting.get(word)?.();
  }

  /** Waits for a word, or for the end of the program. */
  async hears(word: string): Promise<void> {
    if (!this.said.has(word)) await new Promise<void>((resolve) => this.waiting.set(word, resolve));
  }

  has = (word: string) => this.said.has(word);
  keep = () => this.child.stdin?.write('keep\n');

  async kill(): Promise<void> {
    this.child.kill('SIGKILL');
    await this.ended;
  }
}

/** What stands in a database that a killed program left behind. */
async function leftIn(dataDir: string, intakeId: number) {
  const database = new sqlite3.Database(path.join(dataDir, 'counterlag.sqlite'));
  const value = (sql: string) =>
    new Promise<unknown>((resolve, reject) => {
      database.get(sql, (error, row: { value: unknown }) => (error ? reject(error) : resolve(row.value)));
    });
  const left = {
    integrity: await value('SELECT integrity_check value FROM pragma_integrity_check'),
    state: await value(`SELECT state value FROM intakes WHERE id = ${intakeId}`),
    blocks: await value('SELECT COUNT(*) value FROM reading_blocks'),
    trail: await value("SELECT COUNT(*) value FROM trail_rows WHERE subject = 'ReadingBlock'"),
  };
  await new Promise<void>((resolve) => database.close(() => resolve()));
  return left;
}

async function prepared() {
  const engagement = await buildEngagement({ timeZone: 'UTC' });
  const intake = await buildIntake({ engagementId: engagement.id, state: 'read' });
  const base = path.join(folder, 'base.sqlite');
  await sequelize.query(`VACUUM INTO '${base}'`);
  await inTx(() => Intake.destroy({ where: { id: intake.id } }));
  const begin = async (round: number) => {
    const dataDir = path.join(folder, `round-${round}`);
    mkdirSync(dataDir);
    copyFileSync(base, path.join(dataDir, 'counterlag.sqlite'));
    return { dataDir, keeper: new Keeper(dataDir, intake.id) };
  };
  return { begin, intakeId: intake.id };
}

describe('a server killed while it keeps a year of four channels', () => {
  it('leaves all of it or nothing, and a sound database, fifty times', { timeout: 900_000 }, async () => {
    await bundle();
    const { begin, intakeId } = await prepared();
    const random = noise(20_26);
    const whole = { integrity: 'ok', state: 'kept', blocks: wholeBlocks, trail: wholeBlocks };
    const nothing = { integrity: 'ok', state: 'read', blocks: 0, trail: 0 };

    // Once to the end: what it takes from the first write to the commit.
    const unharmed = await begin(0);
    await unharmed.keeper.hears('ready');
    unharmed.keeper.keep();
    await unharmed.keeper.hears('first');
    const firstAt = performance.now();
    await unharmed.keeper.hears('done');
    const writesMs = performance.now() - firstAt;
    await unharmed.keeper.kill();
    expect(await leftIn(unharmed.dataDir, intakeId)).toEqual(whole);

    let amid = 0;
    let before = 0;
    let behind = 0;
    let next = begin(1);
    for (let round = 1; round <= rounds; round++) {
      const { dataDir, keeper } = await next;
      // The next program starts up while this one works.
      if (round < rounds) next = begin(round + 1);
      await keeper.hears('ready');
      keeper.keep();
      // Every tenth at any moment, the others behind the first write.
      if (round % 10 !== 0) await keeper.hears('first');
      await new Promise((resolve) => setTimeout(resolve, random() * writesMs * 0.9));
      await keeper.kill();
      const left = await leftIn(dataDir, intakeId);
      expect([whole, nothing]).toContainEqual(left);
      if (keeper.has('done')) expect(left).toEqual(whole);
      if (left.blocks === wholeBlocks) behind++;
      else if (keeper.has('first')) amid++;
      else before++;
      rmSync(dataDir, { recursive: true, force: true });
    }
    console.info(
      `${rounds} kills while keeping: ${before} before the first write, ${amid} between the first write and the commit, ${behind} behind it; ${writesMs.toFixed(0)} ms from first write to commit when let alone.`,
    );
    expect(amid).toBeGreaterThanOrEqual(30);
  });
});
