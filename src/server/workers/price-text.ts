import {
  checkExamples,
  PriceError,
  priceBills,
  priceQuantities,
  readSchedule,
  type PricedBill,
} from '../../core/tariff';
import type { TextMonth, TextPrice, TextResult, TextTask } from './tasks';

/** Prices a text that can be read: its worked bills, and a month under it and under the text that is kept. */
export function priceText({ text, keptText, month }: TextTask): TextResult {
  const examples = checkExamples(readSchedule(text));
  if (!month) return { examples, yours: null, kept: null };
  return { examples, yours: priceMonth(text, month), kept: keptText === null ? null : priceMonth(keptText, month) };
}

/** Prices the periods up to the month and gives the last. */
function priceMonth(text: string, month: TextMonth): TextPrice {
  const schedule = readSchedule(text);
  const inputs = new Set(schedule.texts.flatMap(({ contract }) => contract.map(({ name }) => name)));
  const given = new Set(
    schedule.texts.flatMap(({ quantities }) =>
      quantities.filter(({ definition }) => definition.kind === 'given').map(({ name }) => name),
    ),
  );
  const only = (values: Record<string, number>, names: Set<string>) =>
    Object.fromEntries(Object.entries(values).filter(([name]) => names.has(name)));
  const told = {
    contract: only(month.contract, inputs),
    ...(month.history ? { history: month.history } : {}),
  };
  try {
    const bills: PricedBill[] = month.load
      ? priceBills(schedule, month.load, {
          ...told,
          periods: month.rows.map(({ from, to }) => ({ from, to })),
          given: month.rows.map(({ quantities }) => only(quantities, given)),
        })
      : priceQuantities(schedule, month.rows, told);
    return { bill: bills.at(-1)! };
  } catch (error) {
    if (error instanceof PriceError) return { refused: error.message };
    throw error;
  }
}
