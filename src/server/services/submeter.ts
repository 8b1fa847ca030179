import { ratedKva } from '../../core/machine';
import type { LoadSeries } from '../../core/load';
import type { PowerSeries } from '../../core/plan';
import { wordNumber } from '../../core/units';
import type { IntakePreview } from '../../schemas/intake';
import { inTx } from '../db/tx';
import type { StoredFile } from '../drawer';
import { invalid, notFound } from '../errors';
import { SubmeterFile } from '../models/SubmeterFile';
import type { Actor } from '../policies/actor';
import { assertNotClosed } from './intake-guard';
import { previewFile, readIntervalFile } from './intake-read';
import { keepPower, removePower } from './load-sources';
import type { ShaftLoadView } from '../../schemas/shaft-load';
import { keepSource, shaftLoadViewOf } from './motor-loads';
import { completedOf, openMotor, type OpenMotor } from './motors';

/** A submeter's file that lies in the drawer. */
export interface ReceivedSubmeter extends StoredFile {
  fileName: string;
  factor: number;
}

/** Input above this many times rated kVA is no motor's: figures of another unit, or of another meter. */
const mostTimesRated = 2;

/**
 * Whether the person may bring in a submeter of a motor.
 *
 * @throws {ServiceError} 404 for those who do not work on its engagement, 409 where that is closed
 */
export async function authorizeSubmeter(actor: Actor, motorId: number): Promise<OpenMotor> {
  const found = await openMotor(actor, motorId);
  assertNotClosed(found.opened);
  return found;
}

/**
 * Reads a file of a motor's submeter and keeps its mean power. From then on the submeter tells the motor's load.
 *
 * @throws {ServiceError} 422 where it cannot be read, carries no active power, or its power is no motor's of this rating
 */
export async function takeSubmeter(actor: Actor, found: OpenMotor, file: ReceivedSubmeter): Promise<ShaftLoadView> {
  const { motor, opened } = found;
  const original = { kind: 'intervals' as const, fileName: file.fileName, sha256: file.sha256 };
  const how = { timeZone: opened.site.timeZone };
  const reading = await previewFile(original, how);
  const problems = 'problems' in reading ? reading.problems : reading.preview.problems;
  if (!('preview' in reading) || problems.length > 0) {
    throw invalid(`${file.fileName} cannot be read. ${problems[0]?.message ?? ''}`.trim(), undefined, { problems });
  }
  const { columnMap } = reading.preview;
  const { load } = await readIntervalFile(original, { ...how, columnMap });
  const power = meanPower(load, file.factor);
  const figures = figuresOf(power);
  refuseUnlikely(found, file, figures.highestKw);
  await inTx(async () => {
    const row = await SubmeterFile.create({
      motorId: motor.id,
      ...file,
      ...figures,
      startMs: power.startMs,
      stepMinutes: power.stepMinutes,
      intervals: power.kw.length,
      columnMap,
      notes: notesOf(reading.preview),
      broughtById: actor.id,
    });
    await keepPower(row.id, power);
    await keepSource(motor.id, 'submeter');
  });
  return shaftLoadViewOf(found);
}

/**
 * Takes a file of a submeter back. With its last file the shift calendar tells the load again.
 *
 * @throws {ServiceError} 404 where the motor has no such file
 */
export async function removeSubmeter({ motor, opened }: OpenMotor, fileId: number): Promise<ShaftLoadView> {
  assertNotClosed(opened);
  await inTx(async () => {
    const file = await SubmeterFile.findOne({ where: { id: fileId, motorId: motor.id } });
    if (!file) throw notFound();
    await removePower(file);
    if ((await SubmeterFile.count({ where: { motorId: motor.id } })) === 0) await keepSource(motor.id, 'calendar');
  });
  return shaftLoadViewOf({ motor, opened });
}

function meanPower({ startMs, stepMinutes, kwh }: LoadSeries, factor: number): PowerSeries {
  return { startMs, stepMinutes, kw: kwh.map((energy) => (energy * factor * 60) / stepMinutes) };
}

function figuresOf({ kw, stepMinutes }: PowerSeries) {
  let missing = 0;
  let sum = 0;
  let highestKw = 0;
  for (const value of kw) {
    if (Number.isNaN(value)) missing += 1;
    else {
      sum += value;
      highestKw = Math.max(highestKw, value);
    }
  }
  return { missing, highestKw, totalKwh: (sum * stepMinutes) / 60 };
}

function refuseUnlikely({ motor }: OpenMotor, { fileName, factor }: ReceivedSubmeter, highestKw: number): void {
  if (highestKw === 0) {
    throw invalid(`${fileName} carries no energy or power drawn. Bring in the file with the motor's kW or kWh.`);
  }
  const ratedKvaOfMotor = ratedKva(completedOf(motor).motor);
  if (highestKw <= mostTimesRated * ratedKvaOfMotor) return;
  throw invalid(
    `The highest reading of ${fileName} is ${wordNumber(highestKw, 1)} kW, and ${motor.name} is rated ${wordNumber(ratedKvaOfMotor, 1)} kVA.`,
    {
      factor: [
        `Check unit and meter of the file. Figures in W need the multiplier 0.001${factor === 1 ? '' : `; this one was read with ${factor}`}.`,
      ],
    },
  );
}

/** What was assumed in reading, in words: columns nothing in the file settles, and the reader's own notes. */
function notesOf({ columns, guesses, report }: IntakePreview): string[] {
  const unsure = [
    ...columns.filter((column) => !column.sure && column.takenAs === 'active'),
    ...guesses.filter((guess) => !guess.sure),
  ].map((one) =>
    'letter' in one
      ? `Column ${one.letter}, ${one.name || 'without a name'}, is taken as ${one.measure ?? 'energy'} in ${one.unit}: ${one.why}`
      : `Taken as ${one.takenAs}: ${one.why}`,
  );
  return [
    ...unsure,
    ...(report?.notes ?? []).filter(({ code }) => code !== 'channel-absent').map((note) => note.message),
  ];
}
