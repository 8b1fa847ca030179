import { quality } from '../load';

// Common practice in utilities' exports; letters A, E, F, S, N also stand so in NEM12.
const estimatedWords =
  /^(e|est|estd|estimated?|estimation|estimé|estimada|estimado|estimato|stimato|stimata|s|subst?|substituted?|substitute|f|forecast|p|prov|provisional|profiled?|interpolated|i|ersatzwert|ersatz|geschätzt|geschaetzt|g|w|corrected|edited|e\d\d|s\d\d|f\d\d|vee|derived|schatting|geschat)$/i;
const missingWords =
  /^(n|null|missing|miss|no ?data|m|nok|fehlt|fehlend|invalid|absent|none|x|bad|fail(ed)?|gap|nan|n\d\d|manquant|mancante)$/i;
const measuredWords =
  /^(a|act|actual|actual read|real|r|measured|meas|ok|valid|validated|v|good|g0|0|w0|raw|wahrer wert|wahr|gemessen|brut|réel|reel|reale|effettivo|final|normal|true|read|metered|a\d\d|h)$/i;

/** Quality a mark in a file stands for; null if the mark is not known. */
export function qualityOf(mark: string): number | null {
  const word = mark.trim();
  if (word === '' || measuredWords.test(word)) return quality.measured;
  if (estimatedWords.test(word)) return quality.estimated;
  if (missingWords.test(word)) return quality.missing;
  return null;
}
