import type { FieldControl } from '../../core/machine';
import { controlsOf, type MotorSetting } from '../../schemas/plan-settings';
import { spanNames, type SpanSet } from '../../schemas/plan-spans';
import { formatList, formatNumber, formatQuantity } from './format';

/** A motor's setting with its name, and what a brushless machine's panel shows, control by control. */
export interface NamedSetting extends Pick<MotorSetting, 'fieldA' | 'controls'> {
  name: string;
  todayA?: number;
  panelA?: (number | null)[];
}

export const amperes = (fieldA: number) => formatQuantity(fieldA, 'A', { upTo: 1 });

const percent = (share: number) => formatQuantity(100 * share, '%', { upTo: 1 });
const factor = (powerFactor: number) => formatNumber(powerFactor, { decimals: 2 });

/** What is held, as a value: "164 A", "0.95 leading", "600 kvar delivered". */
export function controlWords(control: FieldControl, panelA?: number | null): string {
  switch (control.holds) {
    case 'field-current': {
      const own = amperes(control.fieldCurrentA);
      return panelA === undefined || panelA === null
        ? own
        : `${formatQuantity(panelA, 'A', { decimals: 2 })} at the panel, ${own} of field`;
    }
    case 'field-voltage':
      return `${formatQuantity(control.fieldVoltageV, 'V', { upTo: 1 })} of field voltage`;
    case 'power-factor':
      return control.powerFactor === 1
        ? 'unity power factor'
        : `${factor(control.powerFactor)} ${control.leading ? 'leading' : 'lagging'}`;
    case 'kvar':
      return `${formatQuantity(Math.abs(control.kvarDelivered), 'kvar')} ${control.kvarDelivered < 0 ? 'absorbed' : 'delivered'}`;
    case 'voltage':
      return `${percent(control.setPu)} of rated voltage, droop ${percent(control.droopPu)}`;
    case 'plant-power-factor':
      return `the plant at ${factor(control.powerFactor)}`;
  }
}

/** Whether a regulator follows load and bus, rather than a hand that sets amperes or volts. */
const isRegulated = ({ holds }: FieldControl) => holds !== 'field-current' && holds !== 'field-voltage';

/** A span's name within a sentence. */
const spanWords = (name: string) => name.replace(/^([A-Z])(?=[a-z])/, (letter) => letter.toLowerCase());

/** The controls of a setting that differ, each with the names of its spans; one without names where all are the same. */
function partsOf(setting: NamedSetting, spans: SpanSet): { words: string; names: string[]; regulated: boolean }[] {
  const names = spanNames(spans);
  const parts = new Map<string, { words: string; names: string[]; regulated: boolean }>();
  controlsOf(setting).forEach((control, k) => {
    const words = controlWords(control, setting.panelA?.[k]);
    const part = parts.get(words) ?? { words, names: [], regulated: isRegulated(control) };
    part.names.push(names[k] ?? '');
    parts.set(words, part);
  });
  const all = [...parts.values()];
  return all.length === 1 ? all.map((part) => ({ ...part, names: [] })) : all;
}

/** What one motor is set to, without its name: "164 A", "holds 0.95 leading", "164 A in summer, 150 A in winter". */
export function settingValueWords(setting: NamedSetting, spans: SpanSet): string {
  const parts = partsOf(setting, spans);
  const words = parts.map(({ words: value, names }) => {
    const when = formatList(names.filter((name) => name !== '').map(spanWords));
    return when === '' ? value : `${value} in ${when}`;
  });
  return `${parts[0]?.regulated ? 'holds ' : ''}${words.join(', ')}`;
}

/** What one motor is set to: "M-1 164 A", "M-1 holds 0.95 leading", "M-1 164 A in summer, 150 A in winter". */
export const settingWords = (setting: NamedSetting, spans: SpanSet): string =>
  `${setting.name} ${settingValueWords(setting, spans)}`;

/** Settings in a row; where one goes by span they are parted by semicolons. */
export function settingsWords(settings: readonly NamedSetting[], spans: SpanSet): string {
  const words = settings.map((setting) => settingWords(setting, spans));
  return words.join(words.some((one) => one.includes(',')) ? '; ' : ', ');
}

/** Whether a setting leaves a motor's field as it runs today. */
export function isAsToday(setting: NamedSetting): boolean {
  return controlsOf(setting).every(
    (control) => control.holds === 'field-current' && Math.abs(control.fieldCurrentA - (setting.todayA ?? NaN)) <= 1e-6,
  );
}

/** Whether a setting raises the field, lowers it, or neither throughout. */
export function directionOf(setting: NamedSetting): 'up' | 'down' | null {
  const steps = controlsOf(setting).map((control) =>
    control.holds === 'field-current' ? control.fieldCurrentA - (setting.todayA ?? NaN) : NaN,
  );
  if (steps.every((step) => step > 0)) return 'up';
  return steps.every((step) => step < 0) ? 'down' : null;
}
