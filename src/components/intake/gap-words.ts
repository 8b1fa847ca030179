import type { GapMethod } from '../../core/load';

/** Ways to estimate a gap, as screens name them. */
export const gapMethodNames: Record<GapMethod, string> = {
  'same-weekday': 'Same weekday: mean of four weeks on either side',
  linear: 'Straight line between the readings around it',
};
