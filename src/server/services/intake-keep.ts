import type { BillRecord, IntakeReport } from '../../core/intake';
import { toMinorUnits } from '../../core/units';
import type { LoadSeries } from '../../core/load';
import { billInput, lineLabel, periodFlaws } from '../../schemas/bill';
import { toConfirm, type IntakeView, type LoadDays } from '../../schemas/intake';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound } from '../errors';
import { Bill } from '../models/Bill';
import { Intake } from '../models/Intake';
import { ReadingBlock } from '../models/ReadingBlock';
import type { Actor } from '../policies/actor';
import { createBill, destroyBill } from './bills';
import { present } from './intake';
import { openIntake, openIntakeForChange, type OpenIntake } from './intake-guard';
import { readBillFile, readIntervalFile, type HowToRead } from './intake-read';
import { daysInWords, spanInWords } from './intake-words';
import { daysOf } from './intervals';
import { keepSeries, keptSpans } from './readings';

const minuteMs = 60_000;

/**
 * Keeps what a file holds: readings at the engagement's meter, or bills. All of it or nothing.
 *
 * @throws {ServiceError} 422 where the map still has problems or waits for a word, 409 where it overlaps what is kept
 */
export async function keepIntake(actor: Actor, id: number, version: number): Promise<IntakeView> {
  const open = await openIntakeForChange(actor, id, version);
  const how = assertReady(open.intake);
  if (open.intake.kind === 'intervals') await keepIntervals(open, how);
  else await keepBills(open, how);
  return present(open);
}

function assertReady(intake: Intake): HowToRead {
  const { state, fileName } = intake;
  if (state === 'kept') throw conflict(`${fileName} is kept already.`);
  if (state === 'given-up') throw conflict(`${fileName} was given up. Bring it in again to keep it.`);
  const stored = intake.preview;
  if (!stored || stored.preview.problems.length > 0) {
    const problems = intake.problems ?? [];
    throw invalid(`${fileName} cannot be read as it is matched. ${problems[0]?.message ?? ''}`.trim(), undefined, {
      problems,
    });
  }
  const { count } = toConfirm(stored.preview, stored.confirmed);
  if (count > 0) {
    throw invalid(
      `${count} ${count === 1 ? 'reading' : 'readings'} of columns want your word first. Confirm each in the step Match.`,
    );
  }
  return { timeZone: stored.timeZone, columnMap: stored.preview.columnMap };
}

async function keepIntervals({ intake, opened }: OpenIntake, how: HowToRead): Promise<void> {
  const { load } = await readIntervalFile(intake, how);
  await inTx(async () => {
    await assertFits(load, opened);
    await markKept(intake);
    await keepSeries(opened.meter.id, intake.id, load);
  });
}

/** Whether the readings fit beside those the meter has. */
async function assertFits(load: LoadSeries, { meter, site, engagement }: OpenIntake['opened']): Promise<void> {
  const endMs = load.startMs + load.kwh.length * load.stepMinutes * minuteMs;
  const spans = await keptSpans(meter.id, -8.64e15, 8.64e15);
  const shared = spans.filter((span) => span.startMs < endMs && span.endMs > load.startMs);
  const [first] = shared;
  if (first) {
    const fromMs = Math.max(load.startMs, first.startMs);
    const toMs = Math.min(endMs, Math.max(...shared.map((span) => span.endMs)));
    const file = await Intake.findByPk(first.intakeId);
    const named = file?.engagementId === engagement.id ? `the file ${file.fileName}` : 'a file of another engagement';
    throw conflict(
      `Readings of ${meter.label} from ${spanInWords(fromMs, toMs, site.timeZone)} are kept already, from ${named}. Undo that file first, then keep this one.`,
      { fromMs, toMs, intakeId: file?.engagementId === engagement.id ? file.id : null },
    );
  }
  const other = spans.find((span) => span.stepMinutes !== load.stepMinutes);
  if (other) {
    throw conflict(
      `The kept readings of ${meter.label} are ${other.stepMinutes}-minute intervals, this file has ${load.stepMinutes}-minute intervals. Ask for both in one length, or undo the other file first.`,
      { intakeId: other.intakeId },
    );
  }
}

async function keepBills({ intake, opened }: OpenIntake, how: HowToRead): Promise<void> {
  const { bills, report } = await readBillFile(intake, how);
  const { currency, id: engagementId } = opened.engagement;
  if (report.currency && report.currency !== currency) {
    throw invalid(
      `${intake.fileName} names amounts in ${report.currency}; the engagement ${opened.engagement.code} is in ${currency}. Bring in the bills in ${currency}.`,
    );
  }
  const rows = bills.map((bill, index) => billValues(bill, currency, rowOf(report, index)));
  const twice = periodFlaws(rows.map((row) => row.input)).find((flaw) => flaw.kind === 'overlap');
  if (twice) {
    throw invalid(
      `Two bills of ${intake.fileName} both cover ${daysInWords(twice)}. Look whether the last day belongs to the period, in the step Match.`,
    );
  }
  await inTx(async () => {
    await markKept(intake);
    for (const { input, sourceRow } of rows) {
      await createBill(input, { engagementId, currency, intakeId: intake.id, sourceRow });
    }
  });
}

const rowOf = (report: IntakeReport, index: number) => {
  const row = report.billRows?.[index];
  return row === undefined ? null : `row ${row}`;
};

function billValues(bill: BillRecord, currency: string, sourceRow: string | null) {
  const parsed = billInput.safeParse({
    ...bill.period,
    quantities: bill.quantities,
    lines: bill.charges.map(({ label, amount }) => ({
      label: lineLabel(label, currency),
      amountMinor: toMinorUnits(amount, currency),
    })),
    totalMinor: bill.total === null ? null : toMinorUnits(bill.total, currency),
  });
  if (parsed.success) return { input: parsed.data, sourceRow };
  const issue = parsed.error.issues[0];
  throw invalid(`The bill of ${daysInWords(bill.period)}, ${sourceRow ?? 'row unknown'}: ${issue?.message ?? ''}`, {
    [issue?.path.join('.') ?? 'form']: [issue?.message ?? 'This bill cannot be kept.'],
  });
}

const markKept = (intake: Intake) => intake.update({ state: 'kept', keptAt: new Date(), undoneAt: null });

/** Takes back exactly what a kept file brought in. The file stays in the drawer and can be kept again. */
export async function undoIntake(actor: Actor, id: number, version: number): Promise<IntakeView> {
  const open = await openIntakeForChange(actor, id, version);
  const { intake } = open;
  if (intake.state !== 'kept') throw conflict(`${intake.fileName} is not kept, so there is nothing to undo.`);
  await inTx(async () => {
    const blocks = await ReadingBlock.findAll({ where: { intakeId: id }, attributes: { exclude: ['values'] } });
    for (const block of blocks) await block.destroy();
    for (const bill of await Bill.findAll({ where: { intakeId: id } })) await destroyBill(bill);
    await intake.update({ state: 'undone', undoneAt: new Date() });
  });
  return present(open);
}

/** Mean kW of what the file holds, before it is kept. */
export async function intakePicture(actor: Actor, id: number): Promise<LoadDays> {
  const { intake } = await openIntake(actor, id);
  const stored = intake.preview;
  if (intake.kind !== 'intervals' || !stored || stored.preview.problems.length > 0) throw notFound();
  const { timeZone } = stored;
  const { load } = await readIntervalFile(intake, { timeZone, columnMap: stored.preview.columnMap });
  return daysOf(load, timeZone);
}
