import type { IntervalRole } from './column-map';
import type { IntakeNote } from './types';

/** kvarh of every interval by sense; null where the file does not carry it. */
export interface Reactive {
  lagging: Float64Array | null;
  leading: Float64Array | null;
}

/**
 * Lagging and leading energy from whatever the file carries: registers of their own sense, one signed column, apparent
 * energy or a power factor.
 */
export function reactiveOf(
  channels: ReadonlyMap<IntervalRole, Float64Array>,
  kwh: Float64Array,
  notes: IntakeNote[],
): Reactive {
  const signed = channels.get('reactive-signed');
  const lagging = channels.get('reactive-lagging');
  const leading = channels.get('reactive-leading');
  const sense = channels.get('sense');
  if (signed && sense) {
    notes.push({ code: 'reactive-sensed', message: 'Whether reactive energy lags or leads is told beside it.' });
    return splitSigned(withSense(signed.map(Math.abs), sense));
  }
  if (signed) {
    notes.push({
      code: 'reactive-signed',
      message: 'Reactive energy is one signed column: positive is read as lagging, negative as leading.',
    });
    return splitSigned(signed);
  }
  if (lagging && !leading) {
    if (!isSigned(lagging)) return { lagging, leading: null };
    notes.push({
      code: 'reactive-signed',
      message: 'The lagging column holds negative figures and there is no leading one: negative is read as leading.',
    });
    return splitSigned(lagging);
  }
  if (lagging || leading) return keepSigns(lagging ?? null, leading ?? null, notes);
  const apparent = channels.get('apparent');
  const factor = channels.get('power-factor');
  if (!apparent && !factor) return { lagging: null, leading: null };
  const kvarh = kwh.map((energy, slot) =>
    apparent ? fromApparent(energy, apparent[slot]) : fromPowerFactor(energy, factor?.[slot]),
  );
  const told = sense ?? (isSigned(factor ?? null) ? factor : undefined);
  const source = apparent ? 'apparent energy' : 'the power factor';
  const how = sense
    ? 'lagging and leading as told beside it'
    : told
      ? 'a negative power factor is read as leading'
      : 'taken as lagging: the file does not tell the sense';
  notes.push({ code: 'reactive-derived', message: `kvarh are worked out from ${source}; ${how}.` });
  return told ? splitSigned(withSense(kvarh, told)) : { lagging: kvarh, leading: null };
}

/** Sizes below nought where the sense is leading. */
const withSense = (sizes: Float64Array, sense: Float64Array): Float64Array =>
  sizes.map((size, slot) => ((sense[slot] ?? 0) < 0 && size > 0 ? -size : size));

function splitSigned(signed: Float64Array): Reactive {
  return {
    lagging: signed.map((figure) => (figure < 0 ? 0 : figure)),
    leading: signed.map((figure) => (figure > 0 ? 0 : -figure || figure * 0)),
  };
}

/** Registers of their own sense are never negative: a column of negative figures has lost its sign, a stray one belongs to the other. */
function keepSigns(lagging: Float64Array | null, leading: Float64Array | null, notes: IntakeNote[]): Reactive {
  const lag = lagging?.slice() ?? null;
  let lead = leading?.slice() ?? null;
  if (isSigned(lead) && lead && !lead.some((figure) => figure > 0)) {
    lead = lead.map((figure) => Math.abs(figure));
    notes.push({ code: 'leading-sign', message: 'The leading column is printed negative: its size is kept.' });
  }
  let moved = 0;
  const length = isSigned(lag) || isSigned(lead) ? ((lag ?? lead)?.length ?? 0) : 0;
  for (let slot = 0; slot < length; slot += 1) {
    for (const [own, other] of [
      [lag, lead],
      [lead, lag],
    ] as const) {
      const figure = own?.[slot] ?? 0;
      if (!own || !(figure < 0)) continue;
      own[slot] = 0;
      if (other) other[slot] = (other[slot] ?? 0) - figure;
      moved += 1;
    }
  }
  if (moved > 0)
    notes.push({
      code: 'reactive-negative',
      message: `${moved} negative reactive readings are counted in the opposite sense.`,
    });
  return { lagging: lag, leading: lead };
}

function isSigned(figures: Float64Array | null): boolean {
  for (let slot = 0; slot < (figures?.length ?? 0); slot += 1) if ((figures?.[slot] ?? 0) < 0) return true;
  return false;
}

/** kvarh of an interval from its kVAh: the other side of the right triangle. */
function fromApparent(kwh: number, kvah: number | undefined): number {
  return Math.sqrt(Math.max(0, (kvah ?? Number.NaN) ** 2 - kwh ** 2));
}

/** kvarh of an interval from its mean power factor, a fraction or per cent. */
function fromPowerFactor(kwh: number, printed: number | undefined): number {
  const size = Math.abs(printed ?? Number.NaN);
  const factor = size > 1.5 ? size / 100 : size;
  return kwh === 0 ? 0 : factor > 0 && factor <= 1 ? kwh * Math.tan(Math.acos(factor)) : Number.NaN;
}
