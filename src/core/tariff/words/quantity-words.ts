import { isSame } from '../formula/functions';
import { printFormula } from '../formula/print';
import { channelOf } from '../channels';
import type { MeasureDefinition, PastDefinition, PickDefinition, QuantityEntry, ValueDefinition } from '../model';
import { intervalStartMs } from '../../load';
import { wordNumber, type Rounding } from '../../units';
import { firstIntervalOf } from '../calendar/cells';
import { enterCell } from '../price/cell-block';
import { recordsBefore } from '../price/evaluate-quantities';
import { evaluatePast } from '../price/history';
import { wordPeriod } from '../price/period-plan';
import { withUnit, wordClock, wordInstant, wordName, wordWorking, type Speech } from './speak';

/** How a quantity came about, in one sentence. */
export function explainQuantity(speech: Speech, quantity: QuantityEntry): string {
  const { definition, name, slot, unit, rounding } = quantity;
  const value = withUnit(wordNumber(speech.state.values[slot]!, rounding?.step), unit);
  if (speech.bill.printed[slot] === 1) return `${name} = ${value}, as the bill prints it.`;
  switch (definition.kind) {
    case 'measure':
      return explainMeasure(speech, quantity, definition, value);
    case 'value':
      return explainValue(speech, quantity, definition, value);
    case 'formula':
      return explainFormula(speech, quantity, definition.expression);
    case 'pick':
      return explainPick(speech, quantity, definition, value);
    case 'past':
      return explainPast(speech, quantity, definition, value);
    case 'given':
      return `${name} = ${value}, ${isTold(speech, name) ? 'as given for this period' : 'the value the schedule takes where none is given'}.`;
  }
}

function isTold({ run, bill }: Speech, name: string): boolean {
  const given = run.given[bill.plan.index];
  return given !== undefined && Object.hasOwn(given, name);
}

function wordRounding({ step, mode }: Rounding): string {
  return `to ${step}${mode === 'nearest' ? '' : ` ${mode}`}`;
}

function explainFormula(
  speech: Speech,
  { name, slot, unit, rounding }: QuantityEntry,
  expression: Parameters<typeof wordWorking>[1],
): string {
  const { values } = speech.state;
  const exact = expression.evaluate(values);
  const working = expression.formula.kind === 'number' ? '' : `${wordWorking(speech, expression)} = `;
  const chosen = wordChosen(expression, values);
  if (!rounding || isSame(exact, values[slot]!))
    return `${name} = ${working}${withUnit(wordNumber(values[slot]!, rounding?.step), unit)}${chosen}.`;
  return `${name} = ${working}${wordNumber(exact)}, ${wordRounding(rounding)}: ${withUnit(wordNumber(values[slot]!, rounding.step), unit)}${chosen}.`;
}

const ordinals = ['first', 'second', 'third', 'fourth', 'fifth', 'sixth', 'seventh', 'eighth'];

/** Which value a greatest or least of several took. */
function wordChosen(
  { formula, evaluate, slots, names }: Parameters<typeof wordWorking>[1],
  values: Float64Array,
): string {
  if (formula.kind !== 'call' || (formula.fn !== 'max' && formula.fn !== 'min') || formula.args.length < 2) return '';
  const result = evaluate(values);
  const index = formula.args.findIndex((argument) => {
    if (argument.kind === 'number') return isSame(argument.value, result);
    const factor =
      argument.kind === 'binary' && argument.operator === '*' && argument.left.kind === 'number'
        ? argument.left.value
        : 1;
    const named = argument.kind === 'binary' && argument.operator === '*' ? argument.right : argument;
    const slot = named.kind === 'name' ? slots[names.indexOf(named.name)] : undefined;
    return slot !== undefined && isSame(factor * values[slot]!, result);
  });
  return index < 0 || index >= ordinals.length ? '' : `: the ${ordinals[index]}`;
}

function explainPick(
  speech: Speech,
  { name }: QuantityEntry,
  { of, steps, otherwise }: PickDefinition,
  value: string,
): string {
  const at = of.evaluate(speech.state.values);
  const words =
    of.formula.kind === 'name'
      ? `${of.formula.name} ${wordName(speech, of.formula.name)}`
      : `${printFormula(of.formula)} = ${wordNumber(at)}`;
  const index = steps.findIndex((step) => at >= step.from || isSame(at, step.from));
  const step = steps[index];
  const above = steps[index < 0 ? steps.length - 1 : index - 1];
  const below = above ? `, below ${above.raw}` : '';
  const taken = step?.value ?? otherwise;
  const working =
    taken.formula.kind === 'number' || taken.formula.kind === 'name' ? '' : ` (${wordWorking(speech, taken)})`;
  return `${name} = ${value}${working}: ${words} is ${step ? `from ${step.raw} on${below}` : below.slice(2)}.`;
}

function explainPast(speech: Speech, { name }: QuantityEntry, definition: PastDefinition, value: string): string {
  const { run, bill, state } = speech;
  const { take, over, season, expression } = definition;
  const records = recordsBefore(run, bill, state, expression.slots);
  if (over.includesThis)
    records.push({ period: bill.plan.period, values: state.values, known: state.known, isTold: false });
  const { asked, known, setBy } = evaluatePast(definition, records, bill.plan.period, state.piece.text.text.seasons);
  const of = printFormula(expression.formula);
  if (take.kind === 'streak') return `${name} = ${value}, the periods in a row, up to this one, where ${of} holds.`;
  const inSeason = season ? `, those ${season.isWholly ? 'wholly' : 'mostly'} in ${season.name}` : '';
  const knownWords = known < asked ? ` (${known} ${over.includesThis ? 'earlier ' : ''}known)` : '';
  const span = over.kind === 'last' && !over.includesThis ? `the ${over.words}` : over.words;
  const when = setBy ? `, ${wordPeriod(setBy)}` : '';
  const takes: Partial<Record<PastDefinition['take']['kind'], string>> = {
    count: `the number of periods where ${of} is not 0 in`,
    sum: `the sum of ${of} over`,
  };
  const taken = takes[take.kind] ?? `the ${take.words} ${of} of`;
  return `${name} = ${value}, ${taken} ${span}${inSeason}${knownWords}${when}.`;
}

function wordWindow(speech: Speech, window: string | undefined): string {
  const words = window === undefined ? '' : (speech.state.piece.text.text.windows.get(window)?.words ?? '');
  return window === undefined ? '' : ` in ${window} (${words})`;
}

function wordMeasured({ expression, channel }: MeasureDefinition | ValueDefinition): string {
  return channel ? channelOf(channel).unit + wordSense(channel) : printFormula(expression.formula);
}

function wordSense(channel: string): string {
  return channel.endsWith('Lagging')
    ? ' lagging'
    : channel.endsWith('Leading')
      ? ' leading'
      : channel.endsWith('Net')
        ? ' net'
        : '';
}

/** What a cell is called: with an article, alone, and many of it. */
function cellWords(speech: Speech, { each }: MeasureDefinition): { one: string; single: string; many: string } {
  const { demandWindow } = speech.state.piece.text.text;
  const step = speech.source?.load.stepMinutes ?? 0;
  if (each === 'hour') return { one: 'an hour', single: 'hour', many: 'hours' };
  if (each === 'day') return { one: 'a day', single: 'day', many: 'days' };
  const minutes = each === 'demand window' ? Math.max(step, demandWindow?.minutes ?? 0) : step;
  return { one: `${minutes} minutes`, single: `span of ${minutes} minutes`, many: `spans of ${minutes} minutes` };
}

/** Minutes a cell that set a highest or lowest lasts; 0 for a day. */
function cellMinutes(speech: Speech, { each }: MeasureDefinition): number {
  if (each === 'day') return 0;
  if (each === 'hour') return 60;
  const step = speech.source?.load.stepMinutes ?? 0;
  return each === 'demand window' ? Math.max(step, speech.state.piece.text.text.demandWindow?.minutes ?? 0) : step;
}

function wordCellTime(speech: Speech, definition: MeasureDefinition, ms: number): string {
  const { timeZone } = speech.run.schedule;
  const minutes = cellMinutes(speech, definition);
  if (minutes === 0) return wordInstant(ms, timeZone).replace(/ \d\d:\d\d$/, '');
  return `${wordInstant(ms, timeZone)} to ${wordClock(ms + minutes * 60_000, timeZone)}`;
}

function explainMeasure(speech: Speech, quantity: QuantityEntry, definition: MeasureDefinition, value: string): string {
  const { operation, each, where, count, isDistinctDays, window } = definition;
  const what = wordMeasured(definition);
  const place = wordWindow(speech, window);
  const condition = where
    ? ` where ${printFormula(where.formula, (name) => (speech.run.schedule.slots.has(name) && !where.channels.some((used) => used === name) ? wordName(speech, name) : name))}`
    : '';
  if (operation === 'sum') {
    if (each === undefined) return `${quantity.name} = ${value}, the sum of ${what}${place}.`;
    return explainCellSum(speech, quantity, definition, `${what}${condition}${place}`, value);
  }
  const { one } = cellWords(speech, definition);
  const atMs = speech.state.atMs[quantity.slot]!;
  const when = Number.isNaN(atMs)
    ? '; no such time is whole in the series'
    : `, ${wordCellTime(speech, definition, atMs)}`;
  const which =
    count > 1
      ? `the mean of the ${count} ${operation}${isDistinctDays ? ' on distinct days' : ''}`
      : `the ${operation}`;
  return `${quantity.name} = ${value}, ${which} ${what} of ${one}${condition}${place}${count > 1 && when.startsWith(',') ? `, the first${when.slice(1)}` : when}.`;
}

function explainCellSum(
  speech: Speech,
  { slot, name, unit }: QuantityEntry,
  definition: MeasureDefinition,
  what: string,
  value: string,
): string {
  const { single, many } = cellWords(speech, definition);
  const counted = speech.source && countCells(speech, slot, definition);
  if (!counted) return `${name} = ${value}, the sum over ${many} of ${what}.`;
  const { all, charged, most, mostMs } = counted;
  const best =
    charged === 0
      ? ''
      : `; the most, ${withUnit(wordNumber(most), unit)}, on ${wordCellTime(speech, definition, mostMs)}`;
  return `${name} = ${value}, the sum over ${all} ${all === 1 ? single : many} of ${what}: ${charged} of them ${charged === 1 ? 'has' : 'have'} a part${best}.`;
}

function countCells(
  speech: Speech,
  slot: number,
  { expression, where }: MeasureDefinition,
): { all: number; charged: number; most: number; mostMs: number } | undefined {
  const { source, bill, state } = speech;
  const plan = source?.planOf(bill, state, slot).plan;
  if (!source || plan?.kind !== 'cells') return undefined;
  const { cells } = plan;
  const values = state.values.slice();
  const found = { all: cells.count, charged: 0, most: -Infinity, mostMs: NaN };
  for (let cell = 0; cell < cells.count; cell++) {
    if (enterCell(cells, source.load, cell, values) === 0 || (where && where.evaluate(values) === 0)) continue;
    const part = expression.evaluate(values);
    if (part === 0) continue;
    found.charged++;
    if (part <= found.most) continue;
    found.most = part;
    found.mostMs = intervalStartMs(source.load, firstIntervalOf(cells, cell));
  }
  return found;
}

function explainValue(speech: Speech, { name }: QuantityEntry, definition: ValueDefinition, value: string): string {
  const slot = speech.run.schedule.slots.get(definition.at)!;
  const atMs = speech.state.atMs[slot]!;
  const when = Number.isNaN(atMs) ? 'which has no instant' : `on ${wordInstant(atMs, speech.run.schedule.timeZone)}`;
  return `${name} = ${value}, the ${wordMeasured(definition)} where "${definition.at}" was set, ${when}.`;
}
