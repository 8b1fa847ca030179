import { PriceError } from '../errors';
import { place, unlessFault } from '../formula/compile';
import { isSame } from '../formula/functions';
import type { GivenDefinition, PastDefinition, QuantityEntry, RateEntry } from '../model';
import { decimalsOf, roundToStep, wordNumber } from '../../units';
import type { BillState, Missing, PieceState } from './bill-state';
import { completeTold, evaluatePast, pickValue, recordOf, type HistoryRecord, type PastResult } from './history';
import { wordPeriod } from './period-plan';
import { evaluateIn, roundedValue, setRounded, setValue, type Run } from './run';

/** Works out every value of a piece's text: facts, contract, rates, then the quantities from top to bottom. */
export function evaluateQuantities(run: Run, bill: BillState, state: PieceState): void {
  enterPiece(run, bill, state);
  for (const { quantity, needs } of state.piece.text.quantities) settle(run, bill, state, quantity, needs);
}

/** Works out what hangs on no load: facts, contract, rates; everything else is not known yet. */
export function enterPiece(run: Run, bill: BillState, state: PieceState): void {
  state.known.fill(0);
  state.missing.length = 0;
  setFacts(bill, state);
  setContract(run, bill, state);
  for (const rate of state.piece.text.text.rates) setRate(run, state, rate);
}

function setFacts({ plan }: BillState, state: PieceState): void {
  const { zeroKwh } = state.piece.text.text;
  for (const values of [state.values, ...(state.samples ?? [])]) {
    values[place.days] = plan.days;
    values[place.hours] = plan.hours;
    values[place.zeroPf] = zeroKwh.pf ?? 1;
    values[place.zeroRatio] = zeroKwh.ratio ?? 0;
    values[place.firstDay] = plan.firstDay;
  }
}

function setContract(run: Run, { plan }: BillState, state: PieceState): void {
  const inputs = run.contract[plan.index];
  for (const { name, slot, range, unit, label, default: standard } of state.piece.text.text.contract) {
    const value = inputs && Object.hasOwn(inputs, name) ? inputs[name]! : standard;
    if (value === undefined) {
      state.missing[slot] = { name, kind: 'contract', detail: label ?? unit };
      continue;
    }
    const isOutside = range !== undefined && (value < range[0] || value > range[1]);
    if (!Number.isFinite(value) || isOutside) {
      const allowed = range ? `between ${wordNumber(range[0])} and ${wordNumber(range[1])} ${unit}` : 'a number';
      throw new PriceError(`The contract input "${name}" must be ${allowed}, got ${value}.`, {
        period: plan.period,
        name,
      });
    }
    setValue(state, slot, value);
  }
}

function setRate(run: Run, state: PieceState, { name, slot, place: rate }: RateEntry): void {
  const { season, month } = state.piece;
  const expression =
    rate.kind === 'same' ? rate.expression : rate.kind === 'seasons' ? rate.bySeason[season] : rate.byMonth.get(month);
  if (!expression) {
    state.missing[slot] = {
      name,
      kind: 'month',
      detail: `no ${name} rate for ${month}; add it under rates.${name}.months.`,
    };
    return;
  }
  const cause = firstMissing(state, expression.slots);
  if (cause) state.missing[slot] = cause;
  else setValue(state, slot, evaluateIn(run, state, expression));
}

/** Why one of some values is not known, if so. */
export function firstMissing(state: PieceState, slots: readonly number[]): Missing | undefined {
  for (const slot of slots) {
    if (state.known[slot] !== 1) return state.missing[slot] ?? { name: '', kind: 'printed', detail: '' };
  }
  return undefined;
}

/** Why one of some values is not known for another reason than that the bill does not print it, if so. */
function firstUntold(state: PieceState, slots: readonly number[]): Missing | undefined {
  const slot = slots.find((one) => state.known[one] !== 1 && (state.missing[one]?.kind ?? 'printed') !== 'printed');
  return slot === undefined ? undefined : state.missing[slot];
}

function settle(run: Run, bill: BillState, state: PieceState, quantity: QuantityEntry, needs: readonly number[]): void {
  const { definition, slot } = quantity;
  run.at = undefined;
  const printed = run.source.printed(bill, quantity);
  if (printed !== undefined && !run.isUnity) {
    setRounded(run, bill, state, quantity, printed);
    bill.printed[slot] = 1;
    if (bill.notes) comparePrinted(run, bill, state, quantity, { printed, needs });
    return;
  }
  switch (definition.kind) {
    case 'measure':
    case 'value':
      run.source.measure(run, bill, state, quantity, needs);
      return;
    case 'given':
      settleGiven(run, bill, state, quantity, definition, printed);
      return;
    case 'past':
      settlePast(run, bill, state, quantity, definition, printed);
      return;
    default:
      settleWorkedOut(run, bill, state, quantity, { printed, needs });
  }
}

function settleGiven(
  run: Run,
  bill: BillState,
  state: PieceState,
  quantity: QuantityEntry,
  definition: GivenDefinition,
  printed: number | undefined,
): void {
  const given = run.given[bill.plan.index];
  const told = given && Object.hasOwn(given, quantity.name) ? given[quantity.name] : undefined;
  const asIs = printed ?? told ?? definition.default;
  const value = run.isUnity ? (definition.unity ?? asIs) : asIs;
  if (value === undefined) state.missing[quantity.slot] = { name: quantity.name, kind: 'given', detail: quantity.unit };
  else setRounded(run, bill, state, quantity, value);
}

function workOut(run: Run, state: PieceState, { definition }: QuantityEntry, values = state.values): number {
  if (definition.kind === 'formula') {
    run.at = definition.expression;
    return definition.expression.evaluate(values);
  }
  if (definition.kind !== 'pick') throw new RangeError(`kind must be formula or pick, got ${definition.kind}`);
  run.at = definition.of;
  return pickValue(definition, values);
}

interface Known {
  /** What the bill prints. */
  printed: number | undefined;
  /** Places of the values the quantity is worked out from. */
  needs: readonly number[];
}

function settleWorkedOut(
  run: Run,
  bill: BillState,
  state: PieceState,
  quantity: QuantityEntry,
  { printed, needs }: Known,
): void {
  const { slot } = quantity;
  const cause = firstUntold(state, needs) ?? firstMissing(state, needs);
  if (!cause) {
    const work = (): number => workOut(run, state, quantity);
    const value = printed === undefined ? work() : unlessFault(work);
    if (value !== undefined) setRounded(run, bill, state, quantity, value);
    else if (printed !== undefined) keepPrinted(run, bill, state, quantity, printed);
    return;
  }
  // Only an active quantity nobody prints stands for "some value"; what else is not known leaves the result open.
  if (!state.samples || cause.kind !== 'printed') {
    if (printed !== undefined) keepPrinted(run, bill, state, quantity, printed);
    else state.missing[slot] = cause;
    return;
  }
  const { samples } = state;
  const results = unlessFault(() =>
    samples.map((values) =>
      roundedValue(run, bill, quantity.name, workOut(run, state, quantity, values), quantity.rounding),
    ),
  );
  if (results?.every((result) => isSame(result, results[0]!))) setValue(state, slot, results[0]!);
  else if (printed !== undefined) keepPrinted(run, bill, state, quantity, printed);
  else {
    state.missing[slot] = results ? cause : { ...cause, kind: 'unclear' };
    for (const [i, values] of samples.entries()) values[slot] = results?.[i] ?? 0;
  }
}

/** At unity, what cannot be told keeps its printed value. */
export function keepPrinted(
  run: Run,
  bill: BillState,
  state: PieceState,
  quantity: QuantityEntry,
  printed: number,
): void {
  setRounded(run, bill, state, quantity, printed);
  bill.notes?.add(
    `At unity power factor "${quantity.name}" cannot be told from the figures printed: it keeps ${wordNumber(printed)} ${quantity.unit}.`,
  );
}

function settlePast(
  run: Run,
  bill: BillState,
  state: PieceState,
  quantity: QuantityEntry,
  definition: PastDefinition,
  printed: number | undefined,
): void {
  const { value, asked, known } = lookBack(run, bill, state, quantity, definition);
  // At unity a look back to periods nobody knows tells less than the figure printed.
  if (printed !== undefined && known < asked) keepPrinted(run, bill, state, quantity, printed);
  else setRounded(run, bill, state, quantity, value);
}

function lookBack(
  run: Run,
  bill: BillState,
  state: PieceState,
  quantity: QuantityEntry,
  definition: PastDefinition,
): PastResult {
  const records = recordsBefore(run, bill, state, definition.expression.slots);
  if (definition.over.includesThis)
    records.push({ period: bill.plan.period, values: state.values, known: state.known, isTold: false });
  run.at = definition.expression;
  const { text } = state.piece.text;
  const result = evaluatePast(definition, records, bill.plan.period, text.seasons);
  if (bill.notes && !run.isUnity) notePast(bill, quantity, definition, result);
  return result;
}

/** Earlier periods of a bill, oldest first; told months are completed where a look back needs more than they tell. */
export function recordsBefore(run: Run, bill: BillState, state: PieceState, slots: readonly number[]): HistoryRecord[] {
  const { text } = state.piece.text;
  const told = run.told.map((record) =>
    slots.every((slot) => record.known[slot] === 1) ? record : completeTold(record, text, state),
  );
  return [...told, ...run.bills.slice(0, bill.plan.index).map(recordOf)];
}

function notePast(
  bill: BillState,
  { name }: QuantityEntry,
  { take, over }: PastDefinition,
  { asked, known, value }: { asked: number; known: number; value: number },
): void {
  if (take.kind === 'streak') {
    if (asked > known)
      bill.notes?.add(`"${name}": ${known} in a row known; earlier periods are not, the row may be longer.`);
  } else if (known < asked) {
    const none = known === 0 && !over.includesThis ? `; it is ${wordNumber(value)}` : '';
    bill.notes?.add(`"${name}": ${known} of ${asked} earlier periods known${none}.`);
  }
}

/** Notes a printed figure that differs from what its printed parts give, beyond its rounding. */
function comparePrinted(
  run: Run,
  bill: BillState,
  state: PieceState,
  quantity: QuantityEntry,
  { printed, needs }: Known & { printed: number },
): void {
  const { definition, rounding, unit, name, slot } = quantity;
  if (definition.kind !== 'formula' && definition.kind !== 'pick') return;
  if (firstMissing(state, needs)) return;
  const exact = unlessFault(() => workOut(run, state, quantity)) ?? NaN;
  const asPrinted = rounding ?? { step: Number(`1e-${decimalsOf(printed)}`), mode: 'nearest' as const };
  if (!Number.isFinite(exact) || isSame(roundToStep(exact, asPrinted), state.values[slot]!)) return;
  const words = wordNumber(roundToStep(exact, asPrinted), asPrinted.step);
  bill.notes?.add(
    `"${name}": the bill prints ${wordNumber(printed)} ${unit}, worked out from its parts it is ${words} ${unit}.`
      .replace(/ +/g, ' ')
      .replace(/ ([,.])/g, '$1'),
  );
}

/** Error for a value that a line needs and nobody gives. */
export function missingError(
  bill: BillState,
  cause: Missing,
  line: string,
  unitOf: (name: string) => string,
): PriceError {
  const { period } = bill.plan;
  const about = { period, name: cause.name };
  const when = wordPeriod(period);
  const unit = unitOf(cause.name);
  const withUnit = unit === '' ? '' : ` (${unit})`;
  switch (cause.kind) {
    case 'month':
      return new PriceError(`${when}: ${cause.detail}`, about);
    case 'contract':
      return new PriceError(
        `${when}: the contract does not give "${cause.name}"${withUnit}, which line "${line}" needs. Add it to the contract inputs.`,
        about,
      );
    case 'given':
      return new PriceError(
        `${when}: nothing gives "${cause.name}"${withUnit}, which line "${line}" needs; it is said by the bill, not by the meter. Give it for this period.`,
        about,
      );
    case 'unclear':
      return new PriceError(
        `${when}: at unity power factor nothing tells "${cause.name}"${withUnit}, which line "${line}" needs. Give it for this period.`,
        about,
      );
    case 'printed':
      return new PriceError(
        `${when}: the bill does not give "${cause.name}"${withUnit}, which line "${line}" needs.`,
        about,
      );
  }
}
