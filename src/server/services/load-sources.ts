import type { PowerSeries } from '../../core/plan';
import type { Motor } from '../models/Motor';
import { MotorLoad } from '../models/MotorLoad';
import { SubmeterBlock } from '../models/SubmeterBlock';
import { SubmeterFile } from '../models/SubmeterFile';
import { bytesOfDoubles, doublesOfBytes, monthSlices } from './reading-blocks';
import { calendarOfProfile, type LoadSource } from './shaft-load';

const minuteMs = 60_000;

/** What tells a stored motor's shaft load, and a key that changes whenever that does. */
export interface StoredSource extends LoadSource {
  kind: MotorLoad['source'];
  key: string;
}

/** What tells the shaft load of each motor, in their order. */
export async function loadSourcesOf(motors: readonly Motor[]): Promise<StoredSource[]> {
  const rows = await MotorLoad.findAll({ where: { motorId: motors.map(({ id }) => id) } });
  return Promise.all(
    motors.map((motor) =>
      sourceOf(
        motor,
        rows.find((row) => row.motorId === motor.id),
      ),
    ),
  );
}

async function sourceOf({ id, calendar }: Motor, row: MotorLoad | undefined): Promise<StoredSource> {
  const kind = row?.source ?? 'calendar';
  const key = row ? `${kind} ${row.version}` : '';
  if (row && kind === 'submeter') {
    const files = await submeterFiles(id);
    const metered = { series: await Promise.all(files.map(powerOf)), whenMissing: row.whenMissing };
    return { kind, calendar, metered, key: `${key} ${files.map((file) => file.id).join(' ')}` };
  }
  const profile = kind === 'profile' ? row?.profile : null;
  return { kind, calendar: profile ? calendarOfProfile(profile, calendar) : calendar, key };
}

/** The files of a motor's submeter in the order in which they came: of two readings of one time that of the later stands. */
export const submeterFiles = (motorId: number) => SubmeterFile.findAll({ where: { motorId }, order: ['id'] });

/** Mean power as a file has it. */
async function powerOf(file: SubmeterFile): Promise<PowerSeries> {
  const startMs = Number(file.startMs);
  const kw = new Float64Array(file.intervals).fill(NaN);
  for (const block of await SubmeterBlock.findAll({ where: { submeterFileId: file.id } })) {
    kw.set(doublesOfBytes(block.values), Math.round((Number(block.startMs) - startMs) / (file.stepMinutes * minuteMs)));
  }
  return { startMs, stepMinutes: file.stepMinutes, kw };
}

/** Keeps the mean power of a file, a block a month. Call inside inTx. */
export async function keepPower(submeterFileId: number, { startMs, stepMinutes, kw }: PowerSeries): Promise<void> {
  for (const { month, first, count } of monthSlices({ startMs, stepMinutes, count: kw.length })) {
    await SubmeterBlock.create({
      submeterFileId,
      month,
      startMs: startMs + first * stepMinutes * minuteMs,
      stepMinutes,
      count,
      values: bytesOfDoubles(kw.subarray(first, first + count)),
    });
  }
}

/** Takes a file of a submeter away with its blocks; it stays in the drawer. Call inside inTx. */
export async function removePower(file: SubmeterFile): Promise<void> {
  const where = { submeterFileId: file.id };
  for (const block of await SubmeterBlock.findAll({ where, attributes: { exclude: ['values'] } }))
    await block.destroy();
  await file.destroy();
}

/** Takes away all that tells a motor's load besides its calendar. Call inside inTx. */
export async function forgetLoad(motorId: number): Promise<void> {
  for (const file of await submeterFiles(motorId)) await removePower(file);
  for (const row of await MotorLoad.findAll({ where: { motorId } })) await row.destroy();
}
