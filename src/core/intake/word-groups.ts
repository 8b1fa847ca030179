/** Header words by what they speak of, in English, German, French, Spanish, Italian, Portuguese and Dutch; accents gone. */
// prettier-ignore
export const wordGroups = {
  end: ['end', 'ending', 'ends', 'fin', 'fine', 'bis', 'ende', 'to', 'until', 'eind', 'einde', 'hasta', 'he', 'stop'],
  begin: [
    'start', 'begin', 'beginning', 'starts', 'starting', 'from', 'von', 'debut', 'inizio', 'desde', 'van',
    'beginn', 'anfang', 'ab',
  ],
  date: ['date', 'day', 'datum', 'data', 'fecha', 'giorno', 'jour', 'tag', 'dato', 'dag'],
  time: [
    'time', 'hour', 'hora', 'heure', 'ora', 'uhrzeit', 'zeit', 'tijd', 'tid', 'hr', 'he', 'period', 'interval',
    'slot', 'hh', 'sp',
  ],
  stamp: ['timestamp', 'datetime', 'stamp', 'horodate', 'zeitstempel', 'zeitpunkt', 'readtime', 'localtime'],
  meter: [
    'meter', 'serial', 'nmi', 'mpan', 'pod', 'cups', 'esi', 'ean', 'account', 'zahler', 'zahlpunkt', 'compteur',
    'contatore', 'misuratore', 'contador', 'prm', 'pdl', 'site', 'sitename', 'servicepoint', 'spid', 'usagepoint',
    'meterid', 'logger', 'feeder',
  ],
  channel: [
    'channel', 'quantity', 'kanal', 'canal', 'register', 'obis', 'type', 'measurement', 'direction', 'parameter',
    'suffix', 'obiscode', 'grandeur', 'magnitude', 'flow',
  ],
  unit: ['unit', 'units', 'uom', 'einheit', 'unite', 'unita', 'unidad', 'eenheid'],
  value: ['value', 'reading', 'valeur', 'wert', 'valore', 'valor', 'waarde', 'amount', 'messwert'],
  quality: [
    'quality', 'flag', 'status', 'estimated', 'estimate', 'validity', 'validation', 'code', 'q', 'qc', 'state',
    'statut', 'stato', 'estado', 'qualitat', 'plausibility', 'readtype', 'estimation',
  ],
  active: [
    'kwh', 'consumption', 'usage', 'energy', 'active', 'import', 'imported', 'consumo', 'energia', 'verbrauch',
    'bezug', 'wirkarbeit', 'wirkleistung', 'consommation', 'soutirage', 'prelievo', 'afname', 'verbruik', 'ativa',
    'attiva', 'activa', 'actief', 'actieve', 'vermogen', 'potencia', 'load', 'power', 'demand', 'leistung',
    'puissance', 'potenza', 'usekwh', 'usagekwh', 'lastgang',
  ],
  energy: [
    'energy', 'energie', 'energia', 'consumption', 'usage', 'consumo', 'verbrauch', 'verbruik', 'consommation',
    'arbeit', 'wirkarbeit', 'blindarbeit',
  ],
  power: [
    'power', 'demand', 'leistung', 'wirkleistung', 'blindleistung', 'scheinleistung', 'puissance', 'potenza',
    'potencia', 'vermogen',
  ],
  export: [
    'export', 'exported', 'saliente', 'einspeisung', 'injection', 'injected', 'generation', 'generated',
    'surplus', 'feed', 'feedin', 'immissione', 'excedente', 'vertida', 'teruglevering', 'ruckspeisung',
    'received', 'rec', 'rcvd', 'reverse', 'pv', 'solar',
  ],
  reactive: [
    'reactive', 'blindarbeit', 'blindleistung', 'blindenergie', 'blind', 'reattiva', 'reattivo', 'reactiva',
    'reactivo', 'reativa', 'reativo', 'reactif', 'reactief', 'reactieve',
  ],
  apparent: ['apparent', 'scheinleistung', 'apparente', 'aparente'],
  powerFactor: ['pf', 'powerfactor', 'cosphi', 'cosfi', 'phi', 'lpf'],
  lagging: [
    'lag', 'lagging', 'inductive', 'inductif', 'induktiv', 'induktive', 'induttiva', 'induttivo', 'inductiva',
    'inductivo', 'indutiva', 'indutivo', 'inductief', 'inductieve', 'ind', 'q1', 'rkvarhlag',
  ],
  leading: [
    'lead', 'leading', 'capacitive', 'capacitif', 'kapazitiv', 'kapazitive', 'capacitiva', 'capacitivo',
    'capacitief', 'capacitieve', 'cap', 'kap', 'q4',
  ],
  sense: ['sense', 'lag', 'lagging', 'lead', 'leading', 'ind', 'cap', 'kap', 'quadrant', 'richtung', 'sens', 'senso'],
  register: [
    'register', 'index', 'cumulative', 'zahlerstand', 'stand', 'zahlerstande', 'meterstand', 'odometer',
    'lifetime', 'accumulated', 'cumulated', 'dial', 'totalizer', 'totaliser', 'cumul',
  ],
  touRegister: [
    'peak', 'onpeak', 'offpeak', 'off', 'on', 'mid', 'shoulder', 'night', 'day', 'high', 'low', 'normal', 'dal',
    'piek', 'hp', 'hc', 't1', 't2', 't3', 't4', 'f1', 'f2', 'f3', 'p1', 'p2', 'p3', 'p4', 'p5', 'p6', 'tariff',
    'tarif', 'rate', 'ht', 'nt', 'punta', 'llano', 'valle', 'part',
  ],
  ignorable: [
    'co2', 'cost', 'price', 'temperature', 'temp', 'humidity', 'nsm', 'tariff', 'rate', 'charge', 'kosten',
    'prix', 'prezzo', 'coste', 'voltage', 'current', 'amps', 'spannung', 'max', 'maximum', 'min', 'minimum',
  ],
} satisfies Record<string, string[]>;
