import { addDays, dayNumber, localDateStartMs, meteredDays, meteredOver, type Metered } from '../../core/load';
import type { BillView, MeterCheck, MeteredPeriod } from '../../schemas/bill';
import { ServiceError } from '../errors';
import type { Actor } from '../policies/actor';
import { openEngagement, type OpenEngagement } from './engagements';
import { meteredLoad } from './metered-load';
import { figuresOf, meteredFigures } from './meter-figures';
import { remarksOf } from './meter-remarks';

/** The kept readings of all meters by local day; null where none of the period is kept or they cannot be added up. */
async function daysOf(opened: OpenEngagement, period: { from: string; to: string }): Promise<Metered[] | null> {
  const { timeZone } = opened.site;
  const [fromMs, toMs] = [localDateStartMs(period.from, timeZone), localDateStartMs(period.to, timeZone)];
  const metered = await meteredLoad(opened, fromMs, toMs).catch((error: unknown) => {
    if (error instanceof ServiceError) return null;
    throw error;
  });
  return metered && meteredDays(metered.load, period, timeZone);
}

/** Bills beside the readings of their periods: the readings are gone through once, a day's sums serve every question. */
export async function meterChecks(opened: OpenEngagement, bills: BillView[]): Promise<MeterCheck[]> {
  const [first] = bills;
  if (!first) return [];
  const from = addDays(first.from, -1);
  const to = addDays(
    bills.reduce((latest, bill) => (bill.to > latest ? bill.to : latest), first.to),
    1,
  );
  const days = await daysOf(opened, { from, to });
  if (!days) return [];
  const offset = dayNumber(from);
  return bills.flatMap((bill) => {
    const begins = dayNumber(bill.from) - offset;
    const ends = dayNumber(bill.to) - offset;
    const own = days.slice(begins, ends);
    const whole = meteredOver(own);
    const { expected, missing, estimated } = whole;
    if (missing === expected) return [];
    const figures = figuresOf(bill.quantities, whole);
    const period = { from: bill.from, to: bill.to, before: days[begins - 1]!, days: own, after: days[ends]! };
    return [{ billId: bill.id, expected, missing, estimated, figures, remarks: remarksOf(figures, period) }];
  });
}

/**
 * What the kept readings say of a period, for a bill that is being typed.
 *
 * @throws {ServiceError} 404 for those who do not work on the engagement
 */
export async function meteredPeriod(
  actor: Actor,
  code: string,
  period: { from: string; to: string },
): Promise<MeteredPeriod | null> {
  const days = await daysOf(await openEngagement(actor, code), period);
  const whole = days && meteredOver(days);
  return whole && whole.missing < whole.expected ? meteredFigures(whole) : null;
}
