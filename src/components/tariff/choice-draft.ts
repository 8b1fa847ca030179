import {
  chooseInput,
  contractSchema,
  fromDateNumber,
  toDateNumber,
  type ChoiceView,
  type ChooseInput,
  type ContractField,
  type HistoryField,
} from '../../schemas/tariff';
import { lineToleranceMinor } from '../../schemas/pricing';
import { currencyDecimals, formatAmount, formatNumber } from '../ui/format';
import type { StaleDifference } from '../ui/StaleCompare';
import { typedNumber } from '../ui/typed-number';

/** The form as typed: everything is text until it is sent. */
export interface ChoiceDraft {
  scheduleId: string;
  contract: Record<string, string | boolean>;
  history: Record<string, string>;
  takeNewText: boolean;
  /** In major units of the currency. */
  tolerance: string;
}

/** Schedule as the form needs it: from the library, or as kept with the engagement. */
export interface Choosable {
  id: string;
  contract: ContractField[];
  history: HistoryField[];
}

/** Values of earlier months, oldest first, separated by blanks or semicolons. */
export function typedSeries(text: string): number[] {
  const parts = text.split(/[\s;]+/).filter(Boolean);
  return parts.map((part) => typedNumber(part) ?? NaN);
}

function contractOf(draft: ChoiceDraft, fields: ContractField[]): Record<string, number> {
  const entries = fields.flatMap((field): [string, number][] => {
    const typed = draft.contract[field.name];
    if (field.kind === 'flag') return [[field.name, typed ? 1 : 0]];
    if (typeof typed !== 'string' || typed.trim() === '') return [];
    return [[field.name, field.kind === 'date' ? toDateNumber(typed) : (typedNumber(typed) ?? NaN)]];
  });
  return Object.fromEntries(entries);
}

/** What the form sends. */
export function toChooseInput(
  draft: ChoiceDraft,
  schedule: Choosable,
  { version, currency }: { version: number | null; currency: string },
): ChooseInput {
  const history = schedule.history.flatMap(({ name }): [string, number[]][] => {
    const values = typedSeries(draft.history[name] ?? '');
    return values.length > 0 ? [[name, values]] : [];
  });
  return {
    scheduleId: draft.scheduleId,
    contract: contractOf(draft, schedule.contract),
    history: history.length > 0 ? Object.fromEntries(history) : null,
    version,
    takeNewText: draft.takeNewText,
    toleranceMinor: toleranceOf(draft, currency),
  };
}

function toleranceOf({ tolerance }: ChoiceDraft, currency: string): number | undefined {
  if (tolerance.trim() === '') return undefined;
  const typed = typedNumber(tolerance);
  return typed === undefined ? NaN : Math.round(typed * 10 ** currencyDecimals(currency));
}

/** Messages by dotted path, from the schemas the server uses too. */
export function faultsOf(input: ChooseInput, schedule: Choosable | undefined): Record<string, string[]> {
  const faults: Record<string, string[]> = {};
  const shape = chooseInput.safeParse(input);
  for (const issue of shape.error?.issues ?? []) {
    if (issue.path[0] !== 'contract') (faults[issue.path.slice(0, 2).join('.')] ??= []).push(issue.message);
  }
  if (!schedule) return faults;
  const contract = contractSchema(schedule.contract).safeParse(input.contract);
  for (const issue of contract.error?.issues ?? [])
    (faults[`contract.${String(issue.path[0])}`] ??= []).push(issue.message);
  return faults;
}

/** The form as a choice, or the schedule's own values, fill it. */
export function draftOf(
  schedule: Choosable | undefined,
  choice:
    (Pick<ChoiceView, 'scheduleId' | 'contract' | 'history'> & Partial<Pick<ChoiceView, 'toleranceMinor'>>) | null,
  currency: string,
): ChoiceDraft {
  const isChosen = choice !== null && schedule?.id === choice.scheduleId;
  const typed = (field: ContractField): string | boolean => {
    const value = (isChosen ? choice.contract[field.name] : undefined) ?? field.default;
    if (field.kind === 'flag') return value === 1;
    if (value === null) return '';
    return field.kind === 'date' ? fromDateNumber(value) : formatNumber(value, { upTo: 6 });
  };
  const series = (name: string) =>
    ((isChosen ? choice.history?.[name] : undefined) ?? []).map((value) => formatNumber(value, { upTo: 3 })).join(' ');
  return {
    scheduleId: schedule?.id ?? '',
    contract: Object.fromEntries((schedule?.contract ?? []).map((field) => [field.name, typed(field)])),
    history: Object.fromEntries((schedule?.history ?? []).map(({ name }) => [name, series(name)])),
    takeNewText: false,
    tolerance: formatAmount(choice?.toleranceMinor ?? lineToleranceMinor, currency),
  };
}

/** Where two choices differ, in words. */
export function differencesOf(mine: ChooseInput, theirs: ChoiceView, currency: string): StaleDifference[] {
  const money = (minor: number | undefined) => (minor === undefined ? 'as it is' : formatAmount(minor, currency));
  const names = [...new Set([...Object.keys(mine.contract), ...Object.keys(theirs.contract)])];
  const contract = names.map((name) => ({
    label: theirs.contractFields?.find((field) => field.name === name)?.label ?? name,
    mine: String(mine.contract[name] ?? 'not told'),
    theirs: String(theirs.contract[name] ?? 'not told'),
  }));
  const all = [
    { label: 'Schedule', mine: mine.scheduleId, theirs: theirs.scheduleId },
    ...contract,
    { label: 'Tolerance a line', mine: money(mine.toleranceMinor), theirs: money(theirs.toleranceMinor) },
    { label: 'Earlier months', mine: JSON.stringify(mine.history ?? {}), theirs: JSON.stringify(theirs.history ?? {}) },
  ];
  return all.filter((one) => one.mine !== one.theirs);
}
