export { decimalsOf, roundToStep, type RoundingMode, type Rounding } from './rounding';
export { minorUnitDecimals, roundToMinorUnit, toMinorUnits, fromMinorUnits } from './currency';
export { wordNumber, wordMoney, wordOrdinal } from './wording';
