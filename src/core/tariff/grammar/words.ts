/** Groups of a bill's lines. */
export const groups = ['energy', 'demand', 'reactive', 'fixed', 'adjustment', 'tax'] as const;

/** Ways to divide a bill across two texts, seasons or rider months. */
export const straddles = ['intervals', 'days', 'start', 'end'] as const;

/** Whether a bill is of one meter, or of several whose readings are added before anything is measured. */
export const metering = ['one', 'summed'] as const;

/** How well a tariff is known. */
export const statuses = ['found', 'memory', 'invented'] as const;

/** Over what a measure is settled. */
export const cells = ['interval', 'demand window', 'hour', 'day'] as const;

/** What a look back takes; of the mean a number may be said. */
export const takes = ['highest', 'lowest', 'mean', 'mean of 2 highest', 'sum', 'count', 'streak'] as const;

/** Spans of periods of a look back. */
export const overs = [
  'last 11 periods',
  'this and last 11 periods',
  'earlier periods of this year',
  'this and earlier periods of this year',
] as const;

/** Kinds of days. `mon` ... `sun` and `weekdays` hold on no holiday; `weekends` on holidays too. */
export const dayWords = [
  'every day',
  'weekdays',
  'weekends',
  'holidays',
  'sun',
  'mon',
  'tue',
  'wed',
  'thu',
  'fri',
  'sat',
] as const;

/** Units of what a meter measures. */
export const meterUnits = ['kWh', 'kvarh', 'kVAh', 'kW', 'kvar', 'kVA'] as const;

/** Words that are part of formulas and can be no one's name. */
export const formulaWords = ['and', 'or', 'not', 'days', 'hours'] as const;
