import type { IntervalRole } from './column-map';

/** A code that names a channel. */
interface CodedChannel {
  role: IntervalRole;
  why: string;
}

// Quantities of electricity by value group C of OBIS codes (IEC 62056-6-1; from memory): 1 and 2 are active energy or power
// drawn and delivered, 3 and 4 reactive absorbed and delivered, 5 to 8 the quadrants I to IV.
const obisRoles = new Map<string, IntervalRole>([
  ['1', 'active'],
  ['2', 'export'],
  ['3', 'reactive-lagging'],
  ['4', 'reactive-leading'],
  ['5', 'reactive-lagging'],
  ['6', 'ignore'],
  ['7', 'ignore'],
  ['8', 'reactive-leading'],
]);

// Two-letter channels of half-hourly data: active or reactive, import or export (common practice).
const letterRoles = new Map<string, IntervalRole>([
  ['ai', 'active'],
  ['ae', 'export'],
  ['ri', 'reactive-lagging'],
  ['re', 'reactive-leading'],
]);

/** Channel that a name is the code of, or carries as an OBIS code; null if there is none. */
export function codedChannel(name: string): CodedChannel | null {
  const obis = /(?:^|[\s(:*])([1-8])\.(?:4|5|6|7|8|9|25|27|29)\.\d{1,3}\b/.exec(name);
  const byObis = obisRoles.get(obis?.[1] ?? '');
  if (byObis) return { role: byObis, why: `OBIS code ${(obis?.[0] ?? '').replace(/^[\s(:*]/, '')}` };
  const code = name.trim().toLowerCase();
  // Spanish exports: AE entrante (drawn), AS saliente (delivered), with the unit behind.
  const spanish = /^a([es])[\s_]+k?wh$/.exec(code)?.[1];
  if (spanish) return { role: spanish === 'e' ? 'active' : 'export', why: `Channel ${name.trim().slice(0, 2)}` };
  const byLetters = letterRoles.get(code);
  if (byLetters) return { role: byLetters, why: `Channel ${name.trim()}` };
  // R1 to R4 (or Q1 to Q4) are the quadrants of reactive energy; drawn energy runs in I (lagging) and IV (leading).
  const quadrant = /^[rq]([1-4])(?:[\s_([]|$)/.exec(code)?.[1];
  if (!quadrant) return null;
  const roles: Record<string, IntervalRole> = { '1': 'reactive-lagging', '4': 'reactive-leading' };
  return { role: roles[quadrant] ?? 'ignore', why: `Quadrant ${quadrant}` };
}
