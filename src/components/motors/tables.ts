import type { MotorView } from '../../schemas/motor';
import type { LedgerCell, LedgerData, LedgerRow, LedgerValue } from '../ui/ledger';
import { formatDelivered, formatNumber } from '../ui/format';
import { fit } from './words';

const exciterWords = { static: 'static', brushless: 'brushless', 'shaft-dc': 'with commutator' } as const;
const bindingWords: Record<string, string> = { field: 'field', armature: 'stator', 'pull-out': 'pull-out' };

/** A figure of the machine, dashed where it was assumed. */
function machineCell(motor: MotorView, field: string, value: number, decimals: number): LedgerCell {
  return {
    value: formatNumber(value, { decimals }),
    assumed: motor.assumed.some((one) => one.field === field),
  };
}

type Entry = [label: string, unit: string, cell: (motor: MotorView) => LedgerValue];

const plateEntries: Entry[] = [
  ['Drives', '', (motor) => motor.drives ?? { value: 'not said', tone: 'quiet' }],
  ['Rated output', '', ({ plate }) => `${formatNumber(plate.output)} ${plate.outputUnit}`],
  ['Rated voltage', 'kV', ({ plate }) => formatNumber(plate.voltageV / 1000, { upTo: 2 })],
  [
    'Rated power factor',
    '',
    ({ plate }) => `${formatNumber(plate.powerFactor, { decimals: 2 })}${plate.powerFactor < 1 ? ' leading' : ''}`,
  ],
  ['Rated armature current', 'A', (motor) => formatNumber(motor.plate.currentA ?? motor.ratedCurrentA)],
  ['Rated field current', 'A', ({ plate }) => formatNumber(plate.fieldCurrentA, { upTo: 1 })],
  [
    'Rated field voltage',
    'V',
    ({ plate, machine }) =>
      formatNumber(plate.fieldVoltageV ?? machine.ratedFieldCurrentA * machine.fieldResistanceOhm, { upTo: 1 }),
  ],
  ['Exciter', '', ({ plate }) => exciterWords[plate.exciterKind]],
  ['Efficiency', '%', (motor) => machineCell(motor, 'ratedEfficiency', motor.machine.ratedEfficiency * 100, 1)],
];

const machineEntries: Entry[] = [
  ['Speed, poles', 'rpm', ({ speedRpm, machine }) => `${formatNumber(speedRpm, { upTo: 1 })}, ${machine.poles}`],
  ['Xd', 'pu', (motor) => machineCell(motor, 'xdPu', motor.machine.xdPu, 2)],
  ['Xq', 'pu', (motor) => machineCell(motor, 'xqPu', motor.machine.xqPu, 2)],
  ['Ra', 'pu', (motor) => machineCell(motor, 'raPu', motor.machine.raPu, 3)],
  [
    'Field today',
    'A',
    (motor) => ({
      value: formatNumber(motor.fieldTodayA, { upTo: 1 }),
      note: motor.panelTodayA === undefined ? undefined : `panel ${formatNumber(motor.panelTodayA, { decimals: 2 })}`,
    }),
  ],
  [
    'kvar today at usual load',
    'kvar',
    ({ kvarToday }) => ({ value: formatDelivered(kvarToday), tone: kvarToday < 0 ? 'lagging' : 'leading' }),
  ],
  [
    'Most it may deliver',
    'kvar',
    ({ capability: { kvarDelivered } }): LedgerCell =>
      kvarDelivered === null
        ? { value: 'nothing', tone: 'fault' }
        : kvarDelivered < 0
          ? { value: formatDelivered(kvarDelivered), tone: 'lagging' }
          : { value: formatNumber(kvarDelivered), tone: 'leading', strong: true },
  ],
  ['Limit met first', '', ({ capability }) => bindingWords[capability.binding] ?? capability.binding],
  [
    'Pull-out over load, today',
    '',
    ({ pullOutToday, limits }): LedgerCell => ({
      value: formatNumber(pullOutToday, { decimals: 2 }),
      tone: pullOutToday < limits.pullOutMargin ? 'fault' : undefined,
    }),
  ],
];

function tableOf(head: string, entries: Entry[], motors: MotorView[]): LedgerData {
  const rows: LedgerRow[] = entries.map(([label, unit, cell]) => ({
    id: label,
    cells: { entry: label, unit, ...Object.fromEntries(motors.map((motor) => [`m${motor.id}`, cell(motor)])) },
  }));
  return {
    columns: [
      { key: 'entry', head },
      { key: 'unit', head: 'Unit', quiet: true },
      ...motors.map((motor) => ({ key: `m${motor.id}`, head: motor.name, align: 'right' as const, wrap: true })),
    ],
    rows,
  };
}

/** Nameplates side by side, as worded. */
export function plateTable(motors: MotorView[], meters: { id: number; label: string }[]) {
  const labelOf = (motor: MotorView) => meters.find(({ id }) => id === motor.meterId)?.label ?? '';
  const behind: Entry[] = meters.length > 1 ? [['Behind meter', '', labelOf]] : [];
  return tableOf('Nameplate', [...plateEntries.slice(0, 1), ...behind, ...plateEntries.slice(1)], motors);
}

/** Machine data and settings side by side. */
export const settingTable = (motors: MotorView[]) => tableOf('Machine and setting', machineEntries, motors);

/** Limits of a motor in words, for the reference column. */
export function limitWords({ limits }: MotorView): string {
  const reserve = limits.reservePercent > 0 ? `, ${formatNumber(limits.reservePercent)} % kept in reserve` : '';
  return `stator ${formatNumber(limits.armatureA)} A, field ${formatNumber(limits.fieldA, { upTo: 1 })} A, pull-out ${formatNumber(limits.pullOutMargin, { upTo: 2 })} times the load${reserve}`;
}

/** An assumed value with its range: "Xq of M-1, 0.60 to 0.90". */
export function rangeWords(assumed: MotorView['assumed'][number]): string {
  const [low, high] = assumed.range ?? [assumed.value, assumed.value];
  const digits = fit(high);
  return `${assumed.label} of ${assumed.motorName}, ${formatNumber(low, { decimals: digits })} to ${formatNumber(high, { decimals: digits })}${assumed.unit && assumed.unit !== 'pu' ? ` ${assumed.unit}` : ''}`;
}
