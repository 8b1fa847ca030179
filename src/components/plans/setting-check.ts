import { NotConvergedError, panelCurrentA, PullOutError, type FieldControl } from '../../core/machine';
import { admissibleFieldA, settingFault, spanSeries, type SpanRule } from '../../core/plan';
import type { FormLoads, FormMotor } from '../../schemas/plan-form';
import { fieldControlInput } from '../../schemas/plan-input';
import { spanSetInput } from '../../schemas/plan-spans';
import { formatNumber } from '../ui/format';
import { amperes, controlWords } from '../ui/setting-words';
import { controlOf, type SettingDraft } from './setting-draft';
import { spansToInput, type SpanDraft } from './span-draft';

const quartersPerWeek = 672;
/** A Monday 0 h. */
const mondayMs = Date.UTC(2024, 0, 1);

/** Loads at each span of the year, [kW]; null where the parts of the year are not written yet. */
export function loadsOfSpans(loads: FormLoads, draft: SpanDraft, seasons: string[]): number[][] | null {
  const parsed = spanSetInput.safeParse(spansToInput(draft, seasons));
  if (!parsed.success) return null;
  const set = parsed.data;
  const at = (places: number[][]) => [...new Set(places.flat())].map((place) => loads.kw[place]!);
  switch (set.by) {
    case 'year':
      return [loads.kw];
    case 'months':
      return set.spans.map(({ months }) => at(months.map((month) => loads.ofMonth[month - 1] ?? [])));
    case 'schedule':
      return set.spans.map((_, k) => at([loads.ofSeason[k] ?? []]));
    case 'clock': {
      const rules: SpanRule[] = [{ name: set.rest }, ...set.spans];
      const week = { startMs: mondayMs, stepMinutes: 15, count: quartersPerWeek };
      // A shift that begins before the week runs into it: the week is laid twice, its second turn read.
      const { index } = spanSeries(
        rules,
        { ...week, startMs: mondayMs - 7 * 86_400_000, count: 2 * quartersPerWeek },
        'UTC',
      );
      const found = rules.map((): number[][] => []);
      loads.ofQuarter.forEach((places, quarter) => found[index[quartersPerWeek + quarter]!]!.push(places));
      const [rest, ...shifts] = found.map(at);
      return [...shifts, rest!];
    }
  }
}

/** What the form says beneath a value while it is typed. */
export interface SettingRemark {
  words: string;
  isFault: boolean;
}

/** Whether a typed value keeps the limits at the loads of its span; null while it is no value. */
export function remarkOn(motor: FormMotor, draft: SettingDraft, value: string, loads: number[]): SettingRemark | null {
  const parsed = fieldControlInput.safeParse(controlOf(draft, value, motor.machine));
  if (!parsed.success) return null;
  const control: FieldControl = parsed.data;
  try {
    const fault = settingFault(motor, control, loads);
    if (fault) return { words: fault, isFault: true };
  } catch (error) {
    if (error instanceof RangeError) return { words: error.message, isFault: true };
    throw error;
  }
  const many = loads.length === 1 ? 'its load' : `all ${formatNumber(loads.length)} loads`;
  const regulated = control.holds !== 'field-current' && control.holds !== 'field-voltage';
  const words = regulated
    ? `Kept within the limits by its limiters at ${many}.`
    : `${control.holds === 'field-voltage' ? `${controlWords(control)}: ` : ''}within every limit at ${many}.`;
  return { words: words.charAt(0).toUpperCase() + words.slice(1), isFault: false };
}

/** "Today 109 A; 96 to 194 A keep every limit." In panel amperes for a brushless motor whose exciter is known. */
export function rangeWords(motor: FormMotor): string {
  const { machine, todayA, loads } = motor;
  const shown = (fieldA: number) =>
    machine.exciterField ? `${formatNumber(panelCurrentA(machine, fieldA), { decimals: 2 })} A` : amperes(fieldA);
  const where = machine.exciterField ? ' at the panel' : '';
  const range = rangeOf(motor, loads.kw);
  return range === null
    ? `Today ${shown(todayA)}${where}; no constant field keeps every limit at all its loads.`
    : `Today ${shown(todayA)}${where}; ${shown(range.lowA)} to ${shown(range.highA)} keep every limit all year.`;
}

function rangeOf(motor: FormMotor, loads: number[]) {
  try {
    return admissibleFieldA(motor, loads);
  } catch (error) {
    if (error instanceof PullOutError || error instanceof NotConvergedError) return null;
    throw error;
  }
}
