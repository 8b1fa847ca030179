import { roundToStep } from './rounding';

const knownDecimals = new Map<string, number>();

/**
 * Digits of a currency's minor unit. [unitless], 0, 2 or 3 (4 for a few units of account)
 *
 * @param currency  ISO 4217 code, three capital letters
 * @throws {RangeError} if the code is not of that form
 * @source ISO 4217 as carried by the platform's `Intl`. @example minorUnitDecimals('JPY') // => 0
 */
export function minorUnitDecimals(currency: string): number {
  const known = knownDecimals.get(currency);
  if (known !== undefined) return known;
  if (!/^[A-Z]{3}$/.test(currency))
    throw new RangeError(`currency must be an ISO 4217 code such as EUR, got "${currency}"`);
  const decimals =
    new Intl.NumberFormat('en', { style: 'currency', currency }).resolvedOptions().maximumFractionDigits ?? 2;
  knownDecimals.set(currency, decimals);
  return decimals;
}

/** Rounds an amount in major units to the currency's minor unit, half away from zero. */
export function roundToMinorUnit(amount: number, currency: string): number {
  return roundToStep(amount, { step: Number(`1e-${minorUnitDecimals(currency)}`), mode: 'nearest' });
}

/** Amount in integer minor units (cents, yen, fils) of an amount in major units, rounded half away from zero. */
export function toMinorUnits(amount: number, currency: string): number {
  const decimals = minorUnitDecimals(currency);
  return Math.round(roundToMinorUnit(amount, currency) * 10 ** decimals);
}

/** Amount in major units of integer minor units. */
export function fromMinorUnits(amountMinor: number, currency: string): number {
  if (!Number.isInteger(amountMinor)) throw new RangeError(`amountMinor must be an integer, got ${amountMinor}`);
  return amountMinor / 10 ** minorUnitDecimals(currency);
}
