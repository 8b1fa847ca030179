import { stepMs, wallClock, type PlantMoment } from './clock';
import type { PlantPower } from './plant';
import { kestrel } from './scenario';

/** Pulses of the meter stand for this much energy; what is left runs on into the next interval. */
const pulseKwh = 0.8;

interface Register {
  read(energy: number): string;
}

function pulseRegister(): Register {
  let carried = 0;
  return {
    read(energy) {
      const pulses = Math.floor((carried + energy) / pulseKwh + 1e-9);
      carried += energy - pulses * pulseKwh;
      return (pulses * pulseKwh).toFixed(1);
    },
  };
}

/** Values the utility put in where its meter had failed: the quarter-hour of the week before, marked E. */
function sourceIndex(index: number, { date }: PlantMoment): number {
  const { from, to } = kestrel.meterFailure;
  return date >= from && date <= to ? index - 7 * 24 * 4 : index;
}

const clockText = (minutes: number) =>
  `${String(Math.floor(minutes / 60)).padStart(2, '0')}:${String(minutes % 60).padStart(2, '0')}`;

/** Date and clock naming the END of an interval; midnight is 24:00 of the day that ends. */
function endStamp({ startMs, date }: PlantMoment): string {
  const end = wallClock(startMs + stepMs, kestrel.timeZone);
  if (end.minutes > 0) return `${end.date},${clockText(end.minutes)}`;
  const [year, month, day] = date.split('-');
  return `${month}/${day}/${year},24:00`;
}

/** The interval file as the utility sends it: three lines of heading, names, a reading a line, local clock. */
export function meterFile(moments: readonly PlantMoment[], powers: readonly PlantPower[]): string {
  const [active, lagging, leading] = [pulseRegister(), pulseRegister(), pulseRegister()];
  const lines = [
    'Ostrander Valley Light & Power',
    'Interval data,account 88-1042',
    'Multiplier,2400,applied',
    'Meter,Date,Time,kWh Del,kVARh Del,kVARh Rec,Q',
  ];
  const hours = stepMs / 3_600_000;
  moments.forEach((at, index) => {
    const source = sourceIndex(index, at);
    const { kw, kvar } = powers[source] as PlantPower;
    const energy = [
      active.read(kw * hours),
      lagging.read(Math.max(0, kvar) * hours),
      leading.read(Math.max(0, -kvar) * hours),
    ];
    lines.push(`5510-274,${endStamp(at)},${energy.join(',')},${source === index ? 'A' : 'E'}`);
  });
  return `${lines.join('\r\n')}\r\n`;
}
