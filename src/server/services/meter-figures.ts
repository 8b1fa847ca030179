import { energiesDiffer, type Metered, type MeteredPeak } from '../../core/load';
import type { MeteredPeriod, MeterFigure } from '../../schemas/bill';

/** The window of which a peak is spoken first: the quarter-hour, or the shortest the readings allow. */
export const firstPeak = ({ peaks }: Metered): MeteredPeak | undefined => peaks[0];

const factor = (kw: number, kvar: number | null) => (kvar === null || kw <= 0 ? null : kw / Math.hypot(kw, kvar));

/** The figures a bill prints, from the readings of its period. */
export function meteredFigures(metered: Metered): MeteredPeriod {
  const { expected, missing, estimated, kwh, kvarhLagging, kvarhLeading } = metered;
  const peak = firstPeak(metered);
  return {
    expected,
    missing,
    estimated,
    kwh,
    kvarh: kvarhLagging,
    kvarhLeading,
    maxKw: peak?.kw ?? null,
    maxKva: peak?.kva ?? null,
    powerFactorAtPeak: peak ? factor(peak.kw, peak.kvar) : null,
    powerFactorOfPeriod: factor(kwh, kvarhLagging),
  };
}

/** Digits after the point of a printed figure; a power factor is printed with two at least. */
const decimalsOf = (printed: number) => Math.max(2, String(printed).split('.')[1]?.length ?? 0);

/** Whether a printed power factor is a metered one, to the digits printed. */
export function isFactor(printed: number, metered: number | null): boolean {
  return metered !== null && Math.abs(printed - metered) <= 0.5 * 10 ** -decimalsOf(printed) + 1e-9;
}

/** Whether a printed demand is a metered one: bills round to the whole kW or its tenth. */
export function isDemand(printed: number, metered: number | null | undefined): boolean {
  return typeof metered === 'number' && !energiesDiffer(printed, metered);
}

/**
 * Printed quantities beside what the readings say. With readings missing a sum and a peak are the least there can be: only a
 * printed figure below that is contradicted.
 */
export function figuresOf(printed: Record<string, number>, metered: Metered): MeterFigure[] {
  const { kwh, kvarh, kvarhLeading, maxKw, maxKva, powerFactorAtPeak, powerFactorOfPeriod } = meteredFigures(metered);
  const { missing, peaks } = metered;
  const compare = (name: string, value: number | null, agrees: (figure: number) => boolean): MeterFigure[] => {
    const figure = printed[name];
    if (figure === undefined) return [];
    if (value === null) return [{ name, printed: figure, metered: null, agrees: null }];
    const isBelow = energiesDiffer(figure, value) && figure < value;
    return [{ name, printed: figure, metered: value, agrees: missing === 0 ? agrees(figure) : isBelow ? false : null }];
  };
  const energy = (value: number | null) => (figure: number) => value !== null && !energiesDiffer(figure, value);
  const pf = printed.powerFactor;
  const isOfPeriod =
    pf !== undefined && !isFactor(pf, powerFactorAtPeak) && isFactor(pf, powerFactorOfPeriod) && missing === 0;
  const shownFactor = isOfPeriod ? powerFactorOfPeriod : powerFactorAtPeak;
  return [
    ...compare('kwh', kwh, energy(kwh)),
    ...compare('maxKw', maxKw, (figure) => peaks.some(({ kw }) => isDemand(figure, kw))),
    ...compare('maxKva', maxKva, (figure) => peaks.some(({ kva }) => isDemand(figure, kva))),
    ...compare('kvarh', kvarh, energy(kvarh)),
    ...compare('kvarhLeading', kvarhLeading, energy(kvarhLeading)),
    ...(pf === undefined
      ? []
      : [
          {
            name: 'powerFactor',
            printed: pf,
            metered: shownFactor,
            agrees: missing > 0 || shownFactor === null ? null : isFactor(pf, shownFactor),
          },
        ]),
  ];
}
