/**
 * The load asked for exceeds what the machine's field can hold in synchronism.
 *
 * `pullOutPowerW` is the greatest power it could have held: terminal power per phase when thrown by the kernel,
 * three-phase shaft power when thrown by `operatingPoint`. [W]
 */
export class PullOutError extends Error {
  readonly pullOutPowerW: number;

  constructor(message: string, pullOutPowerW: number) {
    super(message);
    this.name = 'PullOutError';
    this.pullOutPowerW = pullOutPowerW;
  }
}

/** An iteration ended without reaching its tolerance: no result is better than a guess. */
export class NotConvergedError extends Error {
  readonly code: string;
  readonly iterations: number;
  readonly residual: number;

  constructor(code: string, iterations: number, residual: number) {
    super(`${code} did not converge in ${iterations} iterations (residual ${residual}). Check the values given.`);
    this.name = 'NotConvergedError';
    this.code = code;
    this.iterations = iterations;
    this.residual = residual;
  }
}

/** Throws the RangeError of house style unless `ok`. */
export function requireRange(ok: boolean, name: string, range: string, received: unknown): void {
  if (!ok) throw new RangeError(`${name} must be ${range}, got ${String(received)}`);
}
