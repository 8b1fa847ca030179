import type { Measure } from './types';

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

/** A unit as it is written in files, and what it is worth in the unit the core uses. */
export interface UnitMeaning {
  unit: string;
  quantity: 'active' | 'reactive' | 'apparent' | 'other';
  measure: Measure;
  /** Multiplies a figure to kWh, kvarh, kVAh (or kW, kvar, kVA). */
  factor: number;
}

const unitRows: [string[], string, UnitMeaning['quantity'], Measure, number][] = [
  [['wh'], 'Wh', 'active', 'energy', 0.001],
  [['kwh', 'kwhs', 'kwatth'], 'kWh', 'active', 'energy', 1],
  [['mwh'], 'MWh', 'active', 'energy', 1000],
  [['gwh'], 'GWh', 'active', 'energy', 1_000_000],
  [['w', 'watt', 'watts'], 'W', 'active', 'power', 0.001],
  [['kw'], 'kW', 'active', 'power', 1],
  [['mw'], 'MW', 'active', 'power', 1000],
  [['varh', 'varhr', 'vah r'], 'varh', 'reactive', 'energy', 0.001],
  [['kvarh', 'kvarhr', 'kvahr', 'rkvah', 'kvarhs', 'kvrh'], 'kvarh', 'reactive', 'energy', 1],
  [['mvarh'], 'Mvarh', 'reactive', 'energy', 1000],
  [['var'], 'var', 'reactive', 'power', 0.001],
  [['kvar', 'kvars'], 'kvar', 'reactive', 'power', 1],
  [['mvar'], 'Mvar', 'reactive', 'power', 1000],
  [['vah'], 'VAh', 'apparent', 'energy', 0.001],
  [['kvah'], 'kVAh', 'apparent', 'energy', 1],
  [['mvah'], 'MVAh', 'apparent', 'energy', 1000],
  [['va'], 'VA', 'apparent', 'power', 0.001],
  [['kva'], 'kVA', 'apparent', 'power', 1],
  [['mva'], 'MVA', 'apparent', 'power', 1000],
];

const otherUnits = [
  'v',
  'kv',
  'volt',
  'volts',
  'a',
  'amp',
  'amps',
  'hz',
  'c',
  'degc',
  'degf',
  'co2',
  'tco2',
  'kgco2',
  '$',
  '€',
  '£',
  'usd',
  'eur',
  'gbp',
  'm3',
  'therm',
  'therms',
  'btu',
];

const units = new Map<string, UnitMeaning>();
for (const [spellings, unit, quantity, measure, factor] of unitRows) {
  for (const spelling of spellings) units.set(spelling, { unit, quantity, measure, factor });
}

/** Meaning of a unit by its spelling, whatever its capitals; null if it is none of power or energy. */
export function unitMeaning(spelling: string): UnitMeaning | null {
  return units.get(spelling.toLowerCase().replace(/[^a-z]/g, '')) ?? null;
}

/** The unit named in a header: the last word that is one. One letter counts only in brackets or alone. */
export function unitOfHeader(name: string): UnitMeaning | null {
  const bracketed = /[[(]\s*([^\])]+?)\s*[\])]/g;
  for (const found of name.matchAll(bracketed)) {
    const meaning = unitMeaning((found[1] ?? '').replace(/\s*(\/|per)\s*.*/i, ''));
    if (meaning) return meaning;
  }
  const words = headerWords(name);
  for (const word of [...words].reverse()) {
    if (word.length === 1 && words.length > 1) continue;
    const meaning = units.get(word);
    if (meaning) return meaning;
  }
  // Names run together: UsagekWh, totalkvarh.
  const glued = words.map((word) => /(kwh|mwh|kvarh|kvah)$/.exec(word)?.[1]).find((unit) => unit !== undefined);
  return glued ? (units.get(glued) ?? null) : null;
}

/** Whether a header names a unit that is no electrical energy or power. */
export function isForeignUnit(name: string): boolean {
  return headerWords(name).some((word) => otherUnits.includes(word) && word.length > 1) || /[$€£°]/.test(name);
}

/** Patterns of header words, in the languages files come in. `mentions` looks for whole words or their beginnings. */
export const wordGroups = {
  end: ['end', 'ending', 'ends', 'fin', 'fine', 'bis', 'ende', 'to', 'until', 'eind', 'einde', 'hasta', 'he', 'stop'],
  begin: [
    'start',
    'begin',
    'beginning',
    'starts',
    'starting',
    'from',
    'von',
    'debut',
    'inizio',
    'desde',
    'van',
    'beginn',
    'anfang',
    'ab',
  ],
  date: ['date', 'day', 'datum', 'data', 'fecha', 'giorno', 'jour', 'tag', 'dato', 'dag'],
  time: [
    'time',
    'hour',
    'hora',
    'heure',
    'ora',
    'uhrzeit',
    'zeit',
    'tijd',
    'tid',
    'hr',
    'he',
    'period',
    'interval',
    'slot',
    'hh',
    'sp',
  ],
  stamp: ['timestamp', 'datetime', 'stamp', 'horodate', 'zeitstempel', 'zeitpunkt', 'readtime', 'localtime'],
  meter: [
    'meter',
    'serial',
    'nmi',
    'mpan',
    'pod',
    'cups',
    'esi',
    'ean',
    'account',
    'zahler',
    'zahlpunkt',
    'compteur',
    'contatore',
    'misuratore',
    'contador',
    'prm',
    'pdl',
    'site',
    'sitename',
    'servicepoint',
    'spid',
    'usagepoint',
    'meterid',
    'logger',
    'feeder',
  ],
  channel: [
    'channel',
    'quantity',
    'kanal',
    'canal',
    'register',
    'obis',
    'type',
    'measurement',
    'direction',
    'parameter',
    'suffix',
    'obiscode',
    'grandeur',
    'magnitude',
    'flow',
  ],
  unit: ['unit', 'units', 'uom', 'einheit', 'unite', 'unita', 'unidad', 'eenheid'],
  value: ['value', 'reading', 'valeur', 'wert', 'valore', 'valor', 'waarde', 'amount', 'messwert'],
  quality: [
    'quality',
    'flag',
    'status',
    'estimated',
    'estimate',
    'validity',
    'validation',
    'code',
    'q',
    'qc',
    'state',
    'statut',
    'stato',
    'estado',
    'qualitat',
    'plausibility',
    'readtype',
    'estimation',
  ],
  active: [
    'kwh',
    'consumption',
    'usage',
    'energy',
    'active',
    'import',
    'imported',
    'consumo',
    'energia',
    'verbrauch',
    'bezug',
    'wirkarbeit',
    'wirkleistung',
    'consommation',
    'soutirage',
    'prelievo',
    'afname',
    'verbruik',
    'load',
    'power',
    'demand',
    'leistung',
    'puissance',
    'potenza',
    'usekwh',
    'usagekwh',
    'lastgang',
  ],
  export: [
    'export',
    'exported',
    'einspeisung',
    'injection',
    'injected',
    'generation',
    'generated',
    'surplus',
    'feed',
    'feedin',
    'immissione',
    'excedente',
    'vertida',
    'teruglevering',
    'ruckspeisung',
    'received',
    'rec',
    'rcvd',
    'reverse',
    'pv',
    'solar',
  ],
  reactive: ['reactive', 'blindarbeit', 'blindleistung', 'blind', 'reattiva', 'reactiva', 'reactif'],
  apparent: ['apparent', 'scheinleistung', 'apparente', 'aparente'],
  powerFactor: ['pf', 'powerfactor', 'cosphi', 'cosfi', 'phi', 'lpf'],
  lagging: ['lag', 'lagging', 'inductive', 'induktiv', 'induttiva', 'inductiva', 'inductif', 'ind', 'q1', 'rkvarhlag'],
  leading: ['lead', 'leading', 'capacitive', 'kapazitiv', 'capacitiva', 'capacitif', 'cap', 'q4'],
  register: [
    'register',
    'index',
    'cumulative',
    'zahlerstand',
    'stand',
    'zahlerstande',
    'meterstand',
    'odometer',
    'lifetime',
    'accumulated',
    'cumulated',
    'dial',
    'totalizer',
    'totaliser',
    'cumul',
  ],
  touRegister: [
    'peak',
    'onpeak',
    'offpeak',
    'off',
    'on',
    'mid',
    'shoulder',
    'night',
    'day',
    'high',
    'low',
    'normal',
    'dal',
    'piek',
    'hp',
    'hc',
    't1',
    't2',
    't3',
    't4',
    'f1',
    'f2',
    'f3',
    'p1',
    'p2',
    'p3',
    'p4',
    'p5',
    'p6',
    'tariff',
    'tarif',
    'rate',
    'ht',
    'nt',
    'punta',
    'llano',
    'valle',
    'part',
  ],
  ignorable: [
    'co2',
    'cost',
    'price',
    'temperature',
    'temp',
    'humidity',
    'nsm',
    'tariff',
    'rate',
    'charge',
    'kosten',
    'prix',
    'prezzo',
    'coste',
    'voltage',
    'current',
    'amps',
    'spannung',
    'max',
    'maximum',
    'min',
    'minimum',
  ],
} satisfies Record<string, string[]>;

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

/** A name of a date, a time or an end of a period: figures beneath it may be serials or seconds. */
export function namesTime(name: string): boolean {
  const isNamed = (['stamp', 'date', 'time', 'begin', 'end'] as const).some((group) => mentions(name, group));
  return isNamed || /epoch|unix|^ts$/i.test(name);
}
