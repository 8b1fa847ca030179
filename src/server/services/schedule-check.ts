import type { CheckInput, CheckView, MonthChoice, MonthSource } from '../../schemas/schedule-editor';
import { formatBillName } from '../../components/ui/format';
import { TariffChoice } from '../models/TariffChoice';
import type { Actor } from '../policies/actor';
import { presentExample, presentMonth } from '../presenters/schedule-check';
import { presentScheduleSheet } from '../presenters/schedule-sheet';
import { calculateText } from '../workers/pool';
import type { TextMonth } from '../workers/tasks';
import { listBills } from './bills';
import { listEngagements, openEngagement } from './engagements';
import { pricingGround } from './pricing';
import { authorizeSchedules } from './schedule-revisions';
import { readScheduleText } from './schedule-files';
import { openScheduleFile } from './schedules';

/** Id of a text that stands for itself: the one it says. */
const ownId = (text: string) => /^schedule:\s*([a-z0-9-]+)/m.exec(text)?.[1] ?? 'example';

/**
 * Everything that can be said of a text while it is written: its problems, how it reads, whether it reproduces its worked
 * bills, and what a month costs under it and under the text that is kept.
 */
export async function checkSchedule(actor: Actor, input: CheckInput, today: string): Promise<CheckView> {
  authorizeSchedules(actor);
  const { slug, text, month } = input;
  const kept = slug === null ? null : await openScheduleFile(actor, slug);
  const file = readScheduleText(slug ?? ownId(text), text);
  const { sheet, problems } = presentScheduleSheet(file, today);
  const basis = month && (await monthBasis(actor, month));
  if (!file.schedule) {
    const keptPrice = basis && kept?.schedule ? await priceKept(kept.text, basis.month) : null;
    return { problems, sheet, examples: [], month: basis && presentMonth(basis, { yours: null, kept: keptPrice }) };
  }
  const keptText = kept?.schedule ? kept.text : null;
  const result = await calculateText({ text, keptText, month: basis?.month ?? null });
  const examples = result.examples.map((example) => presentExample(example, text));
  return { problems, sheet, examples, month: basis && presentMonth(basis, result) };
}

/** While the text is broken the kept one goes on to be priced. */
async function priceKept(keptText: string, month: TextMonth) {
  return (await calculateText({ text: keptText, keptText: null, month })).yours;
}

/** A month and what it is priced from. */
export interface MonthBasis {
  code: string;
  name: string;
  billedMinor: number | null;
  currency: string;
  month: TextMonth;
}

/** @throws {ServiceError} 404 for an engagement the person may not know of */
async function monthBasis(actor: Actor, { code, billId }: MonthChoice): Promise<MonthBasis | null> {
  const opened = await openEngagement(actor, code);
  const ground = await pricingGround(opened);
  const index = ground.bills.findIndex((bill) => bill.id === billId);
  const bill = ground.bills[index];
  if (!bill) return null;
  const rows = ground.bills.slice(0, index + 1).map(({ from, to, quantities }) => ({ from, to, quantities }));
  return {
    code,
    name: formatBillName(bill),
    billedMinor: bill.totalMinor ?? (bill.lines.length > 0 ? bill.linesMinor : null),
    currency: bill.currency,
    month: { rows, contract: ground.contract, history: ground.history ?? null, load: ground.load },
  };
}

/** Engagements with bills a text can be priced on, those that use the schedule first. */
export async function monthSources(actor: Actor, scheduleId: string): Promise<MonthSource[]> {
  const choices = new Map((await TariffChoice.findAll()).map((choice) => [choice.engagementId, choice.scheduleId]));
  const sources = await Promise.all(
    (await listEngagements(actor)).map(async ({ engagement }): Promise<MonthSource> => {
      const bills = (await listBills(engagement.id)).map((bill) => ({ id: bill.id, name: formatBillName(bill) }));
      const { code, title, id } = engagement;
      return { code, title, uses: choices.get(id) === scheduleId, bills };
    }),
  );
  return sources.filter(({ bills }) => bills.length > 0).sort((a, b) => Number(b.uses) - Number(a.uses));
}
