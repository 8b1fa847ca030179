import type { Test } from './evidence';
import { isForeignUnit, unitOfHeader } from './units';
import { headerWords, mentions, namesPowerFactor } from './words';

/** What the name of a column of a table of bills says. */
interface BillMeaning {
  role: 'quantity' | 'charge' | 'rate' | 'total' | 'ignore';
  quantity?: string;
  unit?: string;
  tests: Test[];
}

const moneyWords =
  /\b(charges?|costs?|amounts?|fees?|tax(es)?|vat|gst|levy|levies|surcharges?|penalt(y|ies)|credits?|adjustments?|riders?|discounts?|rebates?|bill(ed)? amount|kosten|betrag|entgelt|steuer|abgaben?|importe|impuesto|coste|costo|imposta|accisa|montant|prix total|taxes?|usd|eur|gbp|cad|aud|chf|inr|zar|pln|dollars?|service|customer|delivery|supply|total due|due)\b|[$€£¥₹]/i;
const rateWords =
  /(\bper\b|\/)\s*(kwh|kw|kva|kvarh|mwh|day|month)\b|\b(unit price|price|rate(?! class)|tariff rate|preis|prezzo|precio)\b/i;
const idWords =
  /\b(accounts?|meter|serial|id|no|nr|number|invoice|reference|ref|rate class|class|schedule|tariff|service point|customer name|name|site|address|type|status|year)\b/i;
const leftMoney = /\b(previous balance|balance forward|balance|arrears|payments?|paid|deposit|carried forward)\b/i;
const lateMoney =
  /\b(late (fee|payment|charge)s?|interest|penalty interest|dunning|reminder fee|mahngeb[uü]hr|verzugszins(en)?|recargo por mora|int[eé]r[eê]ts?)\b/i;
const totalWords =
  /\b(total|gesamt|totale|importe total|montant total|amount due|total due|bill amount|invoice (amount|total|value)|(amount|invoice) billed|(current|new) charges|amount payable|net amount|gross amount|grand total|summe|sum|rechnungsbetrag|gesamtbetrag)\b/i;

/** A header as lower-case words with single spaces, signs of money kept. */
const plain = (name: string): string => headerWords(name).join(' ');

/** Payments and what was owed before: no part of the bill. */
export const isBalance = (name: string): boolean => leftMoney.test(plain(name));

/** What is asked for paying late: no part of the bill unless its total says so. */
export const isLateFee = (name: string): boolean => lateMoney.test(plain(name));

/** A total of the whole bill by its name. */
export const namesTotal = (name: string): boolean =>
  totalWords.test(plain(name)) && !/\bsub ?total\b/.test(plain(name));

/** Reads the meaning of a column's name; `looksLikeMoney` is what its cells show. */
export function billMeaning(name: string, looksLikeMoney: boolean): BillMeaning {
  const words = plain(name);
  if (words === '') return { role: 'ignore', tests: [[true, 'It has no name']] };
  if (rateWords.test(name) || /\b(c|ct|cents?) ?\/? ?kwh\b/i.test(name))
    return { role: 'rate', tests: [[true, 'Named as a rate, not an amount']] };
  if (isBalance(name)) return { role: 'ignore', tests: [[true, 'Named as a payment or balance, no part of the bill']] };
  if (isLateFee(name))
    return { role: 'ignore', tests: [[true, 'Named as a fee for paying late, no part of the bill']] };
  const isMoney = looksLikeMoney || moneyWords.test(words) || moneyWords.test(name);
  if (isMoney && !isPlainQuantity(name, looksLikeMoney)) return moneyMeaning(words, looksLikeMoney);
  const quantity = quantityOf(name);
  if (quantity) return { role: 'quantity', ...quantity };
  if (totalWords.test(words)) return { role: 'total', tests: [[true, 'Named as a total']] };
  if (idWords.test(words) || isForeignUnit(name))
    return { role: 'ignore', tests: [[true, 'Names the account or another quantity']] };
  return { role: 'charge', tests: [[false, 'Figures without a unit: taken as a line of the bill']] };
}

/** `Service kWh`, `Total kWh delivered`: a unit beats a word that also names money, unless the cells are money. */
function isPlainQuantity(name: string, looksLikeMoney: boolean): boolean {
  if (looksLikeMoney) return false;
  return (
    (unitOfHeader(name) !== null || namesPowerFactor(name)) &&
    !/\b(charges?|costs?|amounts?|fees?|tax|vat|surcharge|penalty|credit|adjustment|kosten|betrag|importe|montant)\b|[$€£¥₹]|\b(usd|eur|gbp)\b/i.test(
      plain(name),
    )
  );
}

/** A total of one part of the bill: of its energy, of its taxes. */
const namesPart = (words: string): boolean =>
  /\b(energy|demand|delivery|supply|kwh|kw|before)\b/.test(words) ||
  (/\b(tax(es)?|vat)\b/.test(words) && !/\b(incl|including|inclusive|inkl|with|after)\b/.test(words));

function moneyMeaning(words: string, looksLikeMoney: boolean): BillMeaning {
  const why: Test = looksLikeMoney ? [true, 'Its cells are money'] : [true, 'Named as money'];
  if (namesTotal(words) && !namesPart(words)) {
    return { role: 'total', tests: [why, [true, 'Named as the total']] };
  }
  return { role: 'charge', tests: [why] };
}

/** The quantity a name speaks of, with its unit; null if it names none. */
export function quantityOf(name: string): { quantity: string; unit?: string; tests: Test[] } | null {
  if (namesPowerFactor(name)) return { quantity: 'powerFactor', tests: [[true, 'Named a power factor']] };
  const unit = unitOfHeader(name);
  const words = plain(name);
  const quantity = unit?.quantity ?? (mentions(name, 'reactive') ? 'reactive' : null);
  const measure = unit?.measure ?? null;
  const named: Test = unit ? [true, `Named in ${unit.unit}`] : [false, 'Named without a unit'];
  const suffix = periodSuffix(words);
  const isBilled = /\b(billed|billing|billable|chargeable|verrechnet)\b/.test(words);
  const isContract =
    /\b(contract(ed|ual)?|subscribed|reserved|agreed|capacity|contratada|souscrite|impegnata|vertraglich)\b/.test(
      words,
    );
  const demand = (kind: string): string =>
    (isContract ? `contract${kind}` : isBilled ? `billed${kind}` : `max${kind}`) + suffix;
  const result = (own: string, fallback: string): { quantity: string; unit: string; tests: Test[] } => ({
    quantity: own,
    unit: unit?.unit ?? fallback,
    tests: [named],
  });
  if (quantity === 'reactive') {
    if (measure === 'power') return result(demand(/lead|capacit/.test(words) ? 'KvarLeading' : 'Kvar'), 'kvar');
    return result(
      /\b(lead|leading|capacitive|cap|kapazitiv|export|received)\b/.test(words)
        ? `kvarhLeading${suffix}`
        : `kvarh${suffix}`,
      'kvarh',
    );
  }
  if (quantity === 'apparent')
    return measure === 'power' ? result(demand('Kva'), 'kVA') : result(`kvah${suffix}`, 'kVAh');
  if (quantity === 'active' && measure === 'power') return result(demand('Kw'), 'kW');
  if (quantity === 'active')
    return result(mentions(name, 'export') && !/\bimport\b/.test(words) ? `kwhExport${suffix}` : `kwh${suffix}`, 'kWh');
  if (/\bdemand\b/.test(words)) return result(demand('Kw'), 'kW');
  if (/\b(consumption|usage|energy|consumo|verbrauch|consommation|wirkarbeit|verbruik)\b/.test(words))
    return result(`kwh${suffix}`, 'kWh');
  return null;
}

/** `Peak kW`, `Peak demand`: the highest of all hours, no time-of-use period. */
const isBarePeak = (words: string) => /\bpeak (demand|kw|kva|kvar|load)\b/.test(words) && !/\bon ?peak\b/.test(words);

/** Ending of a quantity's name for a time-of-use period; '' for all hours. */
function periodSuffix(words: string): string {
  if (/\bsuper ?off ?(peak)?\b/.test(words)) return 'SuperOffPeak';
  if (/\boff ?peak\b|\boffpeak\b/.test(words)) return 'OffPeak';
  if (/\b(part(ial)? ?peak|partial|mid ?peak|shoulder|intermediate|semi ?peak)\b/.test(words)) return 'PartPeak';
  if (/\b(on ?peak|onpeak|peak|punta|pointe)\b/.test(words)) return isBarePeak(words) ? '' : 'Peak';
  const numbered = /\bp([1-6])\b/.exec(words);
  if (numbered) return `P${numbered[1] ?? ''}`;
  if (/\bnight\b/.test(words)) return 'Night';
  return /\bday\b/.test(words) ? 'Day' : '';
}
