import type { MotorView } from '../../schemas/motor';
import type { LedgerCell, LedgerData, LedgerRow, LedgerValue } from '../ui/ledger';
import { formatDelivered, formatNumber, formatQuantity } from '../ui/format';
import { limitWord } from './curves';
import { fieldMeter } from './field-meter';

const exciterWords = { static: 'static', brushless: 'brushless', 'shaft-dc': 'with commutator' } as const;
const unitWords = { hp: 'hp', 'metric-hp': 'metric hp', kW: 'kW' } as const;

/** A figure of the machine, dashed where it was assumed. */
function machineCell(
  motor: MotorView,
  field: string,
  value: number,
  style: { decimals?: number; upTo?: number },
): LedgerCell {
  return {
    value: formatNumber(value, style),
    assumed: motor.assumed.some((one) => one.field === field),
  };
}

type Entry = [label: string, unit: string, cell: (motor: MotorView) => LedgerValue];

const plateEntries: Entry[] = [
  ['Drives', '', (motor) => motor.drives ?? { value: 'not said', tone: 'quiet' }],
  ['Rated output', '', ({ plate }) => `${formatNumber(plate.output)} ${unitWords[plate.outputUnit]}`],
  ['Rated voltage', 'kV', ({ plate }) => formatNumber(plate.voltageV / 1000, { upTo: 2 })],
  [
    'Rated power factor',
    '',
    ({ plate }) => `${formatNumber(plate.powerFactor, { decimals: 2 })}${plate.powerFactor < 1 ? ' leading' : ''}`,
  ],
  ['Rated armature current', 'A', (motor) => formatNumber(motor.plate.currentA ?? motor.ratedCurrentA)],
  [
    'Rated field current',
    'A',
    (motor) => machineCell(motor, 'ratedFieldCurrentA', motor.machine.ratedFieldCurrentA, { upTo: 1 }),
  ],
  [
    'Rated field voltage',
    'V',
    (motor) => {
      const { plate, machine } = motor;
      const volts = plate.fieldVoltageV ?? machine.ratedFieldCurrentA * machine.fieldResistanceOhm;
      return machineCell(motor, 'fieldResistanceOhm', volts, { upTo: 1 });
    },
  ],
  ['Exciter', '', ({ plate }) => exciterWords[plate.exciterKind]],
  [
    'Efficiency',
    '%',
    (motor) => machineCell(motor, 'ratedEfficiency', motor.machine.ratedEfficiency * 100, { decimals: 1 }),
  ],
];

const machineEntries: Entry[] = [
  ['Speed, poles', 'rpm', ({ speedRpm, machine }) => `${formatNumber(speedRpm, { upTo: 1 })}, ${machine.poles}`],
  ['Xd', 'pu', (motor) => machineCell(motor, 'xdPu', motor.machine.xdPu, { decimals: 2 })],
  ['Xq', 'pu', (motor) => machineCell(motor, 'xqPu', motor.machine.xqPu, { decimals: 2 })],
  ['Ra', 'pu', (motor) => machineCell(motor, 'raPu', motor.machine.raPu, { decimals: 3 })],
  [
    'Field today, as its ammeter shows it',
    'A',
    (motor) => {
      const { decimals, shownA } = fieldMeter(motor.machine);
      return formatNumber(shownA(motor.fieldTodayA), { upTo: decimals });
    },
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
  ['Limit met first', '', (motor) => limitWord(motor, motor.capability.binding)],
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

/** Entries that only some plates have: shown where one of the motors has them. */
const rareEntries: [Entry, has: (motor: MotorView) => boolean][] = [
  [
    ['Service factor, raises no limit', '', ({ plate }) => said(plate.serviceFactor, { decimals: 2 })],
    ({ plate }) => plate.serviceFactor !== undefined,
  ],
  [
    ['Temperature rise, class', 'K', ({ plate }) => riseWords(plate)],
    ({ plate }) => (plate.temperatureRiseC ?? plate.insulationClass) !== undefined,
  ],
  [
    [
      'Exciter field at rated field',
      'A',
      ({ panel }) => (panel ? formatNumber(panel.ratedA, { upTo: 2 }) : { value: 'none', tone: 'quiet' }),
    ],
    ({ panel }) => panel !== undefined,
  ],
];

const said = (value: number | undefined, style: { decimals?: number; upTo?: number }): LedgerValue =>
  value === undefined ? { value: 'not said', tone: 'quiet' } : formatNumber(value, style);

function riseWords({ temperatureRiseC, insulationClass }: MotorView['plate']): LedgerValue {
  const words = [temperatureRiseC !== undefined && formatNumber(temperatureRiseC), insulationClass].filter(Boolean);
  return words.length > 0 ? words.join(', ') : { value: 'not said', tone: 'quiet' };
}

/** Nameplates side by side, as worded. */
export function plateTable(motors: MotorView[], meters: { id: number; label: string }[]) {
  const labelOf = (motor: MotorView) => meters.find(({ id }) => id === motor.meterId)?.label ?? '';
  const behind: Entry[] = meters.length > 1 ? [['Behind meter', '', labelOf]] : [];
  const rare = rareEntries.filter(([, has]) => motors.some(has)).map(([entry]) => entry);
  return tableOf('Nameplate', [...plateEntries.slice(0, 1), ...behind, ...plateEntries.slice(1), ...rare], motors);
}

/** What the motor may deliver at an end of its voltage band: "1,210, stator". */
function bandCell(motor: MotorView, end: 'low' | 'high'): LedgerValue {
  const at = motor.band?.[end];
  if (!at) return { value: 'no band set', tone: 'quiet' };
  const most = at.kvarDelivered === null ? 'nothing' : formatDelivered(at.kvarDelivered);
  return `${most}, ${limitWord(motor, at.binding)} at ${formatNumber(at.voltagePu, { upTo: 3 })}`;
}

/** Machine data and settings side by side. */
export function settingTable(motors: MotorView[]) {
  const banded = motors.some(({ band }) => band !== null);
  const ends: Entry[] = [
    ['At low voltage', 'kvar', (motor) => bandCell(motor, 'low')],
    ['At high voltage', 'kvar', (motor) => bandCell(motor, 'high')],
  ];
  return tableOf('Machine and setting', [...machineEntries, ...(banded ? ends : [])], motors);
}

/** Limits of a motor in words, for the reference column. */
export function limitWords({ limits, machine }: MotorView): string {
  const { words } = fieldMeter(machine);
  const band = limits.voltageBandPu;
  const pu = (value: number) => formatNumber(value, { upTo: 3 });
  return [
    `stator ${formatQuantity(limits.armatureA, 'A')}`,
    `${limits.fieldBy} ${words(limits.fieldA)}`,
    ...(limits.leastFieldA === undefined ? [] : [`least field ${words(limits.leastFieldA)}`]),
    `pull-out ${formatNumber(limits.pullOutMargin, { upTo: 2 })} times the load`,
    ...(limits.reservePercent > 0 ? [`${formatNumber(limits.reservePercent)} % kept in reserve`] : []),
    ...(band ? [`bus ${pu(band.low)} to ${pu(band.high)} of rated voltage`] : []),
  ].join(', ');
}
