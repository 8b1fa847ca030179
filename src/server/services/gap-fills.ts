import { Op } from 'sequelize';
import { addDays, estimateGap, gapMethods, localDateOf, localDateStartMs, weekdayWeeks } from '../../core/load';
import type { GapEstimate, GapMethod, LoadSeries } from '../../core/load';
import type { GapFillInput, GapFillView, GapPreview, GapPreviews, GapStretch } from '../../schemas/gap-fill';
import { inTx } from '../db/tx';
import { conflict, invalid, notFound, ServiceError, staleVersion } from '../errors';
import { GapFill } from '../models/GapFill';
import type { Meter } from '../models/Meter';
import { User } from '../models/User';
import type { Actor } from '../policies/actor';
import { openEngagement, type OpenEngagement } from './engagements';
import { openForChange } from './intake-guard';
import { spanInWords } from './intake-words';
import { bytesOfDoubles } from './reading-blocks';
import { laidSeries } from './readings';

const minuteMs = 60_000;
/** How far around a gap readings are looked at: the weeks of the same weekday, and the hour of a clock change. */
const aroundMs = (weekdayWeeks * 7 + 1) * 86_400_000;
const shownDays = 3;

type Stretch = Pick<GapStretch, 'fromMs' | 'toMs'>;

function meterFor({ meter, meters }: OpenEngagement, meterId = meter.id): Meter {
  const found = meters.find(({ id }) => id === meterId);
  if (!found) throw notFound();
  return found;
}

/** The readings around a stretch without any estimates; null where none are kept. */
async function measuredAround(meterId: number, { fromMs, toMs }: Stretch): Promise<LoadSeries | null> {
  try {
    return (await laidSeries(meterId, fromMs - aroundMs, toMs + aroundMs, { fills: 'left out' })).load;
  } catch (error) {
    if (error instanceof ServiceError && error.status === 404) return null;
    throw error;
  }
}

/**
 * What each way to estimate a gap would add, with the readings of its days.
 *
 * @throws {ServiceError} 404 for those who do not work on the engagement, 422 where nothing is missing there
 */
export async function previewGap(actor: Actor, code: string, stretch: GapStretch): Promise<GapPreviews> {
  const opened = await openEngagement(actor, code);
  const { timeZone } = opened.site;
  const load = await measuredAround(meterFor(opened, stretch.meterId).id, stretch);
  const estimates =
    load && gapMethods.map((method) => ({ method, ...estimateGap(load, stretch, { method, timeZone }) }));
  if (!load || estimates!.every(({ indexes, left }) => indexes.length + left === 0)) throw nothingMissing();
  const stepMs = load.stepMinutes * minuteMs;
  const firstDay = localDateOf(stretch.fromMs, timeZone);
  const shownFromMs = localDateStartMs(firstDay, timeZone);
  const lastDay = [localDateOf(stretch.toMs - 1, timeZone), addDays(firstDay, shownDays - 1)].sort()[0]!;
  const first = Math.round((shownFromMs - load.startMs) / stepMs);
  const count = Math.round((localDateStartMs(addDays(lastDay, 1), timeZone) - shownFromMs) / stepMs);
  const kwOf = (kwh: number | undefined) =>
    kwh === undefined || Number.isNaN(kwh) ? null : (kwh * 60) / load.stepMinutes;
  return {
    ...{ fromMs: stretch.fromMs, toMs: stretch.toMs, stepMinutes: load.stepMinutes, shownFromMs },
    measuredKw: Array.from({ length: count }, (_, at) => kwOf(load.kwh[first + at])),
    ways: estimates!.map(({ method, indexes, left, kwh }): GapPreview => {
      const at = new Map(indexes.map((index, order) => [index, kwh[order]!]));
      return {
        method,
        ...sumsOf({ indexes, kwh, left }),
        highestKw: indexes.length > 0 ? kwOf(Math.max(...kwh)) : null,
        kw: Array.from({ length: count }, (_, shown) => kwOf(at.get(first + shown))),
      };
    }),
  };
}

const nothingMissing = () =>
  invalid('Nothing is missing there. Load the page again; the readings may have come in.', {
    fromMs: ['No reading is missing in this stretch.'],
  });

function sumsOf({ indexes, kwh, left }: Pick<GapEstimate, 'indexes' | 'kwh' | 'left'>) {
  const sum = kwh.reduce((total, energy) => total + energy, 0);
  return { intervals: indexes.length, left, kwh: indexes.length === 0 || Number.isNaN(sum) ? null : sum };
}

/** What a fill holds, worked out from the measured readings as they stand. */
async function valuesOf(meterId: number, { fromMs, toMs }: Stretch, how: { method: GapMethod; timeZone: string }) {
  const load = await measuredAround(meterId, { fromMs, toMs });
  if (!load) return { stepMinutes: 60, intervals: 0, left: 0, kwh: null, values: Buffer.alloc(0) };
  const estimate = estimateGap(load, { fromMs, toMs }, how);
  const first = Math.round((fromMs - load.startMs) / (load.stepMinutes * minuteMs));
  const count = Math.ceil((toMs - fromMs) / (load.stepMinutes * minuteMs));
  const columns = (['kwh', 'kvarhLagging', 'kvarhLeading'] as const).map((channel) => {
    const column = new Float64Array(count).fill(NaN);
    estimate.indexes.forEach((index, order) => (column[index - first] = estimate[channel][order]!));
    return bytesOfDoubles(column);
  });
  return { stepMinutes: load.stepMinutes, ...sumsOf(estimate), values: Buffer.concat(columns) };
}

/**
 * Has a gap estimated; every interval of it is marked estimated wherever it goes.
 *
 * @throws {ServiceError} 404, 409 where the engagement is closed or the stretch is estimated already, 422 where nothing
 *   is missing or nothing can be estimated in this way
 */
export async function fillGap(actor: Actor, code: string, input: GapFillInput): Promise<GapFillView> {
  const opened = await openForChange(actor, code);
  const { timeZone } = opened.site;
  const meter = meterFor(opened, input.meterId);
  const { fromMs, toMs, method } = input;
  const fill = await inTx(async () => {
    const where = { meterId: meter.id, fromMs: { [Op.lt]: toMs }, toMs: { [Op.gt]: fromMs } };
    const known = await GapFill.findOne({ where });
    if (known) {
      throw conflict(
        `${spanInWords(Number(known.fromMs), Number(known.toMs), timeZone)} is estimated already. Take that back first.`,
      );
    }
    const values = await valuesOf(meter.id, { fromMs, toMs }, { method, timeZone });
    if (values.intervals + values.left === 0) throw nothingMissing();
    if (values.intervals === 0) throw invalid('Nothing can be estimated in this way.', { method: [whyNot(method)] });
    return GapFill.create({ meterId: meter.id, fromMs, toMs, method, ...values, madeById: actor.id });
  });
  return presentFill(fill, actor.name);
}

const whyNot = (method: GapMethod) =>
  method === 'linear'
    ? 'A straight line is drawn over at most two hours, between measured readings on both sides.'
    : `The same weekday needs two measured readings of the same time within ${weekdayWeeks} weeks on either side.`;

/**
 * Takes an estimate back: the gap is a gap again.
 *
 * @throws {ServiceError} 404, 409 where the engagement is closed or the estimate was worked out again since it was seen
 */
export async function takeBackFill(
  actor: Actor,
  code: string,
  { id, version }: { id: number; version: number },
): Promise<void> {
  const { meters, site } = await openForChange(actor, code);
  await inTx(async () => {
    const fill = await GapFill.findOne({ where: { id, meterId: meters.map((meter) => meter.id) } });
    if (!fill) throw notFound();
    if (fill.version !== version) {
      const what = `The estimate of ${spanInWords(Number(fill.fromMs), Number(fill.toMs), site.timeZone)}`;
      throw staleVersion(what, { version }, presentFill(fill, null));
    }
    await fill.destroy();
  });
}

/** The estimated gaps of a meter that touch [fromMs, toMs), in order. */
export async function listFills(meterId: number, fromMs: number, toMs: number): Promise<GapFillView[]> {
  const fills = await GapFill.findAll({
    where: { meterId, fromMs: { [Op.lt]: toMs }, toMs: { [Op.gt]: fromMs } },
    attributes: { exclude: ['values'] },
    order: ['fromMs'],
  });
  const people = await User.findAll({ where: { id: fills.flatMap((fill) => fill.madeById ?? []) } });
  return fills.map((fill) => presentFill(fill, people.find(({ id }) => id === fill.madeById)?.name ?? null));
}

function presentFill(fill: GapFill, madeBy: string | null): GapFillView {
  const { id, method, intervals, left, kwh, version } = fill;
  const [fromMs, toMs] = [Number(fill.fromMs), Number(fill.toMs)];
  return { id, fromMs, toMs, method, intervals, left, kwh, madeBy, madeAt: fill.createdAt.toISOString(), version };
}

/**
 * Works the estimates of a meter out again after its readings changed; those that come out the same are not written, the
 * others leave their trail. Call inside the transaction of the change.
 */
export async function refreshFills(meterId: number, timeZone: string): Promise<void> {
  for (const fill of await GapFill.findAll({ where: { meterId } })) {
    const stretch = { fromMs: Number(fill.fromMs), toMs: Number(fill.toMs) };
    const values = await valuesOf(meterId, stretch, { method: fill.method, timeZone });
    if (values.values.equals(fill.values) && values.left === fill.left) continue;
    await fill.update(values);
  }
}
