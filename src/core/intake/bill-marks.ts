import { shareOf, type ColumnProfile } from './cells';
import type { RoleFinding } from './evidence';

/** What a cell says of a document: how it was read, or what it is. */
export type DocumentMark = 'estimated' | 'actual' | 'corrected' | 'credit' | 'cancelled' | 'bill';

const vocabulary: [DocumentMark, RegExp][] = [
  ['cancelled', /^(cancelled|canceled|void(ed)?|withdrawn|superseded|storniert|anulad[oa]|annul[ée]e?|annullat[oa])\b/i],
  ['credit', /^(credit(ed)?( ?(note|memo|invoice)\b.*)?$|cn\b|cancels?\b|cancellation\b|reversal\b|storno|gutschrift\b|abono\b|avoir\b|nota di credito\b|nota de cr[eé]dito)/i],
  ['corrected', /\b(correct(ed|ion)|revis(ed|ion)|re-?bill(ed)?|re-?issued?|amended|restated|true-?up|berichtigt|korrigiert|korrektur|rectificad[oa]|rettifica|corrig[ée]e?|rectificative)\b/i],
  ['estimated', /^(e|est\.?)$|\b(estimat(e|ed|ion)|provisional|assessed|gesch[aä]tzt|estimad[oa]|estim[ée]e?|stimat[oa]|geschat)\b/i],
  ['actual', /^(a|act\.?|r|ok)$|\b(actual|read|metered|measured|final|verified|customer|smart|remote|abgelesen|gemessen|real|r[ée]el(le)?|effettiv[oa]|leitura|lectura)\b/i],
  ['bill', /^(i|b|inv\.?)$|\b(invoice|bill|regular|normal|original|standard|rechnung|factura|fattura|facture)\b/i],
]; // prettier-ignore

/** What a word in a column of read types or kinds of documents says; null if it says nothing known. */
export function markOf(text: string): DocumentMark | null {
  const word = text.trim();
  return vocabulary.find(([, pattern]) => pattern.test(word))?.[0] ?? null;
}

const yes = /^(y|yes|true|x|1|ja|si|sí|oui|est\.?)$/i;
const no = /^(n|no|false|0|nein|non)$/i;

/** As `markOf`; a column that asks "Estimated?" answers yes or no. */
export function markUnder(name: string, text: string): DocumentMark | null {
  if (text === '') return null;
  const asked = /\?$|\b(is|estimated|estimate|corrected|credit)\b/i.test(name) ? markOf(name) : null;
  if (asked && yes.test(text)) return asked;
  if (asked && no.test(text)) return asked === 'estimated' ? 'actual' : 'bill';
  return markOf(text);
}

const markNames =
  /\b(type|status|reads?|reading|estimated?|kind|flag|code|document|remarks?|notes?|comments?|quality|art|tipo|ablesung|lectura|relev[ée])\b|^e\/?a$/i;

/** A column of words that tell estimated from actual bills, or bills from credit notes. */
export function markFinding(profile: ColumnProfile): RoleFinding | null {
  const words = [...profile.distinct.keys()];
  if (words.length === 0 || words.length > 12 || profile.isManyValued || shareOf(profile, 'date', 'stamp') > 0.2)
    return null;
  const known = words.filter((word) => markUnder(profile.name, word) !== null);
  const isTelling = known.length === words.length && words.some((word) => markOf(word) === 'estimated');
  const isNamed = isTelling || markNames.test(profile.name.replaceAll('_', ' ')) || markOf(profile.name) !== null;
  if (!isNamed || known.length < words.length * (words.length > 3 ? 0.5 : 0.99)) return null;
  if (shareOf(profile, 'number') > 0.5 && !/estimat/i.test(profile.name)) return null;
  return {
    role: 'read-type',
    tests: [[true, `Its words tell what a document is: ${known.slice(0, 4).join(', ')}`]],
  };
}
