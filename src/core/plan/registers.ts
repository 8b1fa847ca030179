/**
 * Metered registers of one interval after `changeKvarh` more is absorbed in it.
 *
 * Meters count lagging and leading apart, and within one interval both may run. With f = lagging/(lagging + leading):
 *
 *     a = lagging + f e,   b = leading - (1 - f) e
 *     new lagging = max(a, 0) + max(-b, 0),   new leading = max(b, 0) + max(-a, 0)
 *
 * Continuous at e = 0 and exact where only one register ran. With both at zero, e goes to the register of its sign.
 *
 * @param kvarhLagging  Absorbed in the interval. [kvarh], >= 0 or NaN (missing)
 * @param kvarhLeading  Delivered in the interval. [kvarh], >= 0 or NaN
 * @param changeKvarh  More absorbed e; negative when delivered. [kvarh]
 * @returns The registers after the change; NaN in either register gives NaN in both.
 * @throws {RangeError} when a register is negative
 */
export function shiftRegisters(
  kvarhLagging: number,
  kvarhLeading: number,
  changeKvarh: number,
): { kvarhLagging: number; kvarhLeading: number } {
  if (kvarhLagging < 0) throw new RangeError(`kvarhLagging must be >= 0 or NaN, got ${kvarhLagging}`);
  if (kvarhLeading < 0) throw new RangeError(`kvarhLeading must be >= 0 or NaN, got ${kvarhLeading}`);
  const share = laggingShare(kvarhLagging, kvarhLeading);
  const a = kvarhLagging + share * changeKvarh;
  const b = kvarhLeading - (1 - share) * changeKvarh;
  return { kvarhLagging: Math.max(a, 0) + Math.max(-b, 0), kvarhLeading: Math.max(b, 0) + Math.max(-a, 0) };
}

/** Share f of a change that the lagging register takes: its share of both; 1 with both at zero, which sends e by its sign. */
export function laggingShare(kvarhLagging: number, kvarhLeading: number): number {
  const both = kvarhLagging + kvarhLeading;
  return both === 0 ? 1 : kvarhLagging / both;
}
