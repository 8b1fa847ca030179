/** One V-curve of the picture, split where it passes unity: coordinates in the picture's units. */
export interface VCurve {
  loadPu: number;
  lagging: string;
  leading: string;
  unity: { x: number; y: number };
}

const reactancePu = 1.05;
const fieldToEmf = 1 / 1.9;

/**
 * Armature current of a round-rotor motor at rated voltage, resistance neglected.
 *
 *     I = |V - E exp(-j delta)| / X,  sin(delta) = P X / (V E)
 *
 * Derivation: voltage equation V = E + jXI of the motor with P = (V E / X) sin(delta). Decoration only; pages
 * that state results use core/machine.
 *
 * @returns Current [pu], or null where the field cannot hold the load.
 */
function armatureCurrentPu(loadPu: number, emfPu: number): number | null {
  const sine = (loadPu * reactancePu) / emfPu;
  if (sine > 1) return null;
  const real = 1 - emfPu * Math.sqrt(1 - sine * sine);
  return Math.hypot(real, emfPu * sine) / reactancePu;
}

const path = (points: { x: number; y: number }[]) =>
  points.map((p, index) => `${index === 0 ? 'M' : 'L'}${p.x.toFixed(1)} ${p.y.toFixed(1)}`).join('');

/** Family of V-curves from no load upward in equal steps, drawn into a square of the given size. */
export function vCurveFamily(count: number, sizePx: number): VCurve[] {
  const plot = (emfPu: number, currentPu: number) => ({
    x: (emfPu / fieldToEmf / 4.25) * sizePx - 20,
    y: sizePx - 26 - currentPu * sizePx * 0.67,
  });
  return Array.from({ length: count }, (_, index) => {
    const loadPu = 0.005 + (index * 0.97) / (count - 1);
    const unityEmf = Math.hypot(1, loadPu * reactancePu);
    const from = Math.max(0.13, loadPu * reactancePu * 1.06);
    const sample = (low: number, high: number, close: 'start' | 'end') => {
      const points: { x: number; y: number }[] = [];
      for (let step = 0; step <= 60; step += 1) {
        const share = close === 'end' ? 1 - (1 - step / 60) ** 2 : (step / 60) ** 2;
        const emfPu = low + (high - low) * share;
        const currentPu = armatureCurrentPu(loadPu, emfPu);
        if (currentPu !== null && currentPu < (close === 'end' ? 1.2 : 1.42)) points.push(plot(emfPu, currentPu));
      }
      return path(points);
    };
    return {
      loadPu,
      lagging: sample(from, unityEmf, 'end'),
      leading: sample(unityEmf, 2.24, 'start'),
      unity: plot(unityEmf, loadPu),
    };
  });
}
