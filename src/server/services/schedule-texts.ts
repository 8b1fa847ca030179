import { isScalar, LineCounter, parseDocument, type Pair } from 'yaml';

/** A schedule as short as one can be: what a blank beginning holds. */
export const beginText = (slug: string, title: string) => `schedule: ${slug}
title: ${JSON.stringify(title)}
currency: USD
timeZone: America/New_York
source: { publisher: Who bills, title: Name of the sheet, date: 2026-01-01, status: found }
inForce: 2026-01-01 # first day the sheet holds
demandWindow: 15 min
straddle: days

quantities:
  kwh: { sum: kwh, label: Energy }
  maxKw: { highest: kw, label: Highest demand }

charges:
  service: { amount: 100.00, group: fixed, label: Service }
  energy: { per: kwh, rate: 0.10, group: energy, label: Energy }
  demand: { per: maxKw, rate: 10.00, group: demand, label: Demand }
`;

/** A text under another id and title, everything else as it stood; a note to editors about its place in a folder is dropped. */
export function textWithIdentity(text: string, slug: string, title: string): string {
  const own = text.replace(/^# yaml-language-server:.*\n+/, '');
  const { contents } = parseDocument(own, { lineCounter: new LineCounter() });
  const items = (contents as { items?: Pair[] } | null)?.items ?? [];
  const edits = items.flatMap(({ key, value }) => {
    const name = isScalar(key) ? key.value : null;
    if (!isScalar(value) || !value.range || (name !== 'schedule' && name !== 'title')) return [];
    const [from, to] = value.range;
    return [{ from, to, insert: name === 'schedule' ? slug : JSON.stringify(title) }];
  });
  return edits
    .sort((a, b) => b.from - a.from)
    .reduce((result, { from, to, insert }) => result.slice(0, from) + insert + result.slice(to), own);
}
