import type { ContractInput, NumberPlace, RateEntry } from '../model';
import { inPlace } from '../price/text-plan';
import type { PricedInput } from '../types';
import { wordNumber } from '../../units';
import { expressionIn, expressionWords } from './price-words';
import { withUnit, type Speech } from './speak';

/** Contract inputs and rates of the piece as the bill used them; those nobody knows are left out. */
export function writeInputs(speech: Speech): Record<string, PricedInput> {
  const { known, piece } = speech.state;
  const { contract, rates } = piece.text.text;
  return Object.fromEntries([
    ...contract.filter(({ slot }) => known[slot] === 1).map((input) => [input.name, writeContract(speech, input)]),
    ...rates.filter(({ slot }) => known[slot] === 1).map((rate) => [rate.name, writeRate(speech, rate)]),
  ]);
}

function writeContract({ state }: Speech, { name, slot, unit, label, clause }: ContractInput): PricedInput {
  const value = state.values[slot]!;
  const date = String(value).replace(/(\d{4})(\d{2})(\d{2})/, '$1-$2-$3');
  const words = unit === 'date' ? date : withUnit(wordNumber(value), unit === 'flag' ? '' : unit);
  return {
    value,
    unit,
    ...(label !== undefined && { label }),
    ...(clause !== undefined && { clause }),
    explanation: `${name} = ${words}, from the contract.`,
    uses: [],
  };
}

function writeRate(speech: Speech, { name, slot, place }: RateEntry): PricedInput {
  const expression = expressionIn(speech, place)!;
  const uses = [...new Set(inPlace(place).flatMap((one) => one.names))];
  const explanation = `${name} = ${expressionWords(speech, expression)}, ${wordPlace(speech, place)}.`;
  return { value: speech.state.values[slot]!, unit: '', explanation, uses };
}

function wordPlace({ state: { piece } }: Speech, { kind }: NumberPlace): string {
  if (kind === 'months') return `the rider of ${piece.month}`;
  return kind === 'seasons' ? `in ${piece.text.text.seasons?.names[piece.season]}` : 'a rate of the schedule';
}
