import { printFormula } from './formula/print';
import type {
  ChargeDefinition,
  ChargeGroup,
  NumberPlace,
  QuantityEntry,
  Schedule,
  ScheduleSource,
  ScheduleText,
  Straddle,
} from './model';

/** A schedule as plain JSON, for a page that shows it. */
export interface ScheduleDescription {
  id: string;
  title: string;
  currency: string;
  timeZone: string;
  source: ScheduleSource;
  inForce: string | null;
  meters: Schedule['meters'];
  straddle: Straddle;
  /** How what is shared is shared. */
  division: Schedule['division'];
  /** Whose first or last day decides for the whole bill; null: it is shared. */
  ruledBy: Schedule['ruledBy'];
  /** Texts by their first day; the first is the schedule itself. */
  versions: TextDescription[];
  notes: { path: string; message: string }[];
}

/** One text of a schedule. */
export interface TextDescription {
  from: string;
  note: string | null;
  demandWindow: { minutes: number; everyMinutes: number | null } | null;
  rounding: { step: number; mode: string };
  zeroKwh: { pf: number | null; ratio: number | null };
  holidays: { calendar: string | null; add: string[]; drop: string[] };
  seasons: { name: string; words: string }[];
  windows: { name: string; words: string }[];
  contract: {
    name: string;
    label: string | null;
    unit: string;
    default: number | null;
    range: [number, number] | null;
    clause: string | null;
  }[];
  rates: { name: string; words: string }[];
  quantities: {
    name: string;
    label: string | null;
    unit: string;
    clause: string | null;
    kind: QuantityEntry['definition']['kind'];
    words: string;
  }[];
  charges: {
    name: string;
    label: string;
    unit: string | null;
    clause: string | null;
    group: ChargeGroup;
    words: string;
    when: string | null;
  }[];
}

/** Describes a schedule in plain JSON: nothing in it is a function, and changing it changes no schedule. */
export function describeSchedule(schedule: Schedule): ScheduleDescription {
  const { id, title, currency, timeZone, source, inForce, meters, straddle, notes } = schedule;
  return {
    id,
    title,
    currency,
    timeZone,
    source: { ...source },
    inForce,
    meters,
    straddle,
    division: schedule.division,
    ruledBy: { ...schedule.ruledBy },
    versions: schedule.texts.map(describeText),
    notes: notes.map((note) => ({ ...note })),
  };
}

function describeText(text: ScheduleText): TextDescription {
  const { seasons, demandWindow, zeroKwh, holidays, rounding } = text;
  return {
    from: text.from,
    note: text.note ?? null,
    demandWindow: demandWindow
      ? { minutes: demandWindow.minutes, everyMinutes: demandWindow.everyMinutes ?? null }
      : null,
    rounding: { ...rounding },
    zeroKwh: { pf: zeroKwh.pf ?? null, ratio: zeroKwh.ratio ?? null },
    holidays: { calendar: holidays.calendar ?? null, add: [...holidays.add], drop: [...holidays.drop] },
    seasons: (seasons?.names ?? []).map((name, i) => ({ name, words: seasons?.words[i] ?? '' })),
    windows: [...text.windows.values()].map(({ name, words }) => ({ name, words })),
    contract: text.contract.map(({ name, label, unit, range, clause, default: usual }) => ({
      name,
      label: label ?? null,
      unit,
      default: usual ?? null,
      range: range ? [range[0], range[1]] : null,
      clause: clause ?? null,
    })),
    rates: text.rates.map(({ name, place }) => ({ name, words: wordPlace(place, text) })),
    quantities: text.quantities.map((quantity) => ({
      name: quantity.name,
      label: quantity.label ?? null,
      unit: quantity.unit,
      clause: quantity.clause ?? null,
      kind: quantity.definition.kind,
      words: wordQuantity(quantity),
    })),
    charges: text.charges.map(({ name, label, clause, group, definition, when }) => ({
      name,
      label: label ?? name,
      unit: 'unit' in definition ? (definition.unit ?? null) : null,
      clause: clause ?? null,
      group,
      words: wordCharge(definition, text),
      when: when ? printFormula(when.formula) : null,
    })),
  };
}

function wordPlace(place: NumberPlace, { seasons }: ScheduleText): string {
  switch (place.kind) {
    case 'same':
      return printFormula(place.expression.formula);
    case 'seasons':
      return place.bySeason.map(({ formula }, i) => `${seasons?.names[i] ?? ''} ${printFormula(formula)}`).join(', ');
    case 'months':
      return [...place.byMonth].map(([month, { formula }]) => `${month} ${printFormula(formula)}`).join(', ');
  }
}

function wordQuantity({ definition }: QuantityEntry): string {
  switch (definition.kind) {
    case 'measure': {
      const { operation, expression, each, window, where, count, isDistinctDays } = definition;
      const several =
        count > 1 ? `mean of the ${count} ${operation}${isDistinctDays ? ' on distinct days' : ''}` : operation;
      const parts = [
        `${several} ${printFormula(expression.formula)}`,
        each && `each ${each}`,
        window && `in ${window}`,
        where && `where ${printFormula(where.formula)}`,
      ];
      return parts.filter((part) => part !== undefined).join(', ');
    }
    case 'value':
      return `${printFormula(definition.expression.formula)} at ${definition.at}`;
    case 'formula':
      return printFormula(definition.expression.formula);
    case 'pick': {
      const steps = definition.steps.map((step) => `from ${step.raw}: ${printFormula(step.value.formula)}`);
      return `by ${printFormula(definition.of.formula)}: ${steps.join(', ')}, otherwise ${printFormula(definition.otherwise.formula)}`;
    }
    case 'past': {
      const { take, over, season, expression } = definition;
      const inSeason = season ? `, ${season.isWholly ? 'wholly' : 'mostly'} ${season.name}` : '';
      return `${take.words} of ${printFormula(expression.formula)}${take.kind === 'streak' ? '' : `, ${over.words}`}${inSeason}`;
    }
    case 'given':
      return definition.default === undefined ? 'given by the bill' : `given by the bill, else ${definition.default}`;
  }
}

function wordCharge(definition: ChargeDefinition, text: ScheduleText): string {
  const price = (): string =>
    'price' in definition
      ? definition.price
          .map((tier) => `${wordPlace(tier.rate, text)}${tier.to ? ` up to ${printFormula(tier.to.formula)}` : ''}`)
          .join('; ')
      : '';
  const lines = 'isAllAbove' in definition ? (definition.isAllAbove ? 'all above' : definition.of.join(', ')) : '';
  switch (definition.kind) {
    case 'amount':
      return wordPlace(definition.amount, text);
    case 'per':
      return `${price()} per ${definition.unit || definition.perName} of ${definition.perName}`;
    case 'percent':
      return `${price()} %${definition.perName ? ` per ${definition.unit || definition.perName} of ${definition.perName}` : ''} of ${lines}`;
    case 'topUp':
      return `raises ${lines} to ${wordPlace(definition.to, text)}`;
    case 'cap':
      return `lowers ${lines} to ${wordPlace(definition.to, text)}`;
  }
}
