import { wordGroups } from './word-groups';

/** A header split into plain lower-case words, marks and accents gone: `Usage_kWh` gives usage, kwh. */
export function headerWords(name: string): string[] {
  return name
    .replace(/([a-z]{2,})([A-Z][a-z])/g, '$1 $2')
    .normalize('NFD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .split(/[^a-z0-9%$€£]+/)
    .filter((word) => word !== '');
}

const groupSets = new Map(Object.entries(wordGroups).map(([group, words]) => [group, new Set(words)]));

/** Whether a header holds a word of the group. */
export function mentions(name: string, group: keyof typeof wordGroups): boolean {
  const set = groupSets.get(group);
  return headerWords(name).some((word) => set?.has(word));
}

/** A column of power factors, whatever else its name says. */
export function namesPowerFactor(name: string): boolean {
  const words = headerWords(name);
  return (
    mentions(name, 'powerFactor') ||
    (words.includes('power') && words.includes('factor')) ||
    /cos\s*(phi|fi|φ|ϕ)/i.test(name) ||
    /(leistungsfaktor|fattore di potenza|facteur de puissance|factor de potencia)/i.test(name)
  );
}

/** A column of register readings by its name. */
export function namesRegister(name: string): boolean {
  return mentions(name, 'register') || /\bmeter ?readings?\b|(?:^|[^\d])[1-8]\.8\.\d/i.test(name);
}

/** A name of a date, a time or an end of a period: figures beneath it may be serials or seconds. */
export function namesTime(name: string): boolean {
  const isNamed = (['stamp', 'date', 'time', 'begin', 'end'] as const).some((group) => mentions(name, group));
  return isNamed || /epoch|unix|^ts$/i.test(name);
}
