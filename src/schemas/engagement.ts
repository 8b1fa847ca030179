import { z } from 'zod';
import { isTimeZone } from '../core/load';
import { dayInput } from './hour';

/** One tap on an engagement's bus. */
export interface StationView {
  id: string;
  label: string;
  href: string;
  state: 'closed' | 'open' | 'attention';
  /** Why it is open, or what is complete: "2 findings open". */
  reason: string;
}

/** One labelled field of the title strip. */
export interface StripView {
  label: string;
  value: string;
}

/** Initials of a client's name, the first part of an engagement's code: "Kestrel Gap Lime & Stone" gives KG. */
export function initialsOf(name: string): string {
  const words = name
    .normalize('NFD')
    .replace(/[^A-Za-z\s-]/g, '')
    .split(/[\s-]+/)
    .filter((word) => word !== '' && !/^(and|of|the|der|die|das|de|la|le|du)$/i.test(word));
  const first = words[0] ?? '';
  const letters = words.length > 1 ? `${first[0]}${words[1]?.[0]}` : first.slice(0, 2);
  return letters.length < 2 ? 'EN' : letters.toUpperCase();
}

/** The next code for a client: its initials and the number after the highest in use. */
export function nextCode(clientName: string, used: string[]): string {
  const initials = initialsOf(clientName);
  const numbers = used
    .filter((code) => code.startsWith(`${initials}-`))
    .map((code) => Number(code.slice(initials.length + 1)))
    .filter(Number.isInteger);
  return `${initials}-${String(Math.max(0, ...numbers) + 1).padStart(2, '0')}`;
}

const text = (what: string, longest = 120) =>
  z.string().trim().min(1, `Write ${what}.`).max(longest, `Use at most ${longest} characters.`);
const optionalText = z
  .string()
  .trim()
  .max(120, 'Use at most 120 characters.')
  .transform((value) => value || null);
const rowId = (what: string) =>
  z
    .number({ error: `Choose ${what}.` })
    .int()
    .positive(`Choose ${what}.`);

/** Meters are at common service voltages, up to transmission. [kV] */
const serviceVoltageKv = z
  .number({ error: 'Write the voltage in kV, such as 12.47, or leave it empty.' })
  .gt(0, 'A voltage is above nought.')
  .max(800, 'Above 800 kV: write the voltage in kV, not in V.');

/** A meter: one of the site, or a new one. */
export const meterInput = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('known'), id: rowId('the meter') }),
  z.object({
    kind: z.literal('new'),
    label: text("the meter's number", 60),
    serviceVoltageKv: serviceVoltageKv.nullable(),
  }),
]);
export type MeterInput = z.output<typeof meterInput>;

/** A meter as lists show it. */
export interface MeterView {
  id: number;
  label: string;
  serviceVoltageKv: number | null;
}

/** The meters of an engagement, the first naming it, and those of its site that are not among them. */
export interface MetersView {
  meters: MeterView[];
  others: MeterView[];
}

/** A new engagement with what has to be made for it. */
export const engagementInput = z.object({
  /** Made once per form by the browser: the same request sent twice makes one engagement. */
  requestId: z.uuid(),
  code: z
    .string()
    .trim()
    .toUpperCase()
    .regex(/^[A-Z]{2,4}-\d{2,3}$/, 'Write letters, a hyphen and a number, such as KG-02.'),
  title: text('what is audited, such as "Power-bill audit of Works 2"'),
  client: z.discriminatedUnion('kind', [
    z.object({ kind: z.literal('known'), id: rowId('the client') }),
    z.object({
      kind: z.literal('new'),
      name: text("the client's name"),
      city: optionalText,
      currency: z
        .string()
        .trim()
        .toUpperCase()
        .refine(isCurrency, 'Write the currency by its three letters, such as USD.'),
    }),
  ]),
  site: z.discriminatedUnion('kind', [
    z.object({ kind: z.literal('known'), id: rowId('the site') }),
    z.object({
      kind: z.literal('new'),
      name: text("the site's name"),
      place: optionalText,
      timeZone: z.string().refine(isTimeZone, 'Choose the time zone of the site, such as America/Chicago.'),
      jurisdiction: z
        .string()
        .trim()
        .toUpperCase()
        .regex(/^([A-Z]{2}(-[A-Z0-9]{1,3})?)?$/, 'Write the jurisdiction by its short code, such as IL or DE-BY.')
        .transform((value) => value || null),
    }),
  ]),
  meter: meterInput,
  yearFrom: dayInput,
  budgetHours: z
    .number({ error: 'Write the budget in hours, or leave it empty.' })
    .gt(0, 'A budget is above nought.')
    .max(10_000, 'Above 10,000 h: check the budget.')
    .nullable(),
  memberIds: z.array(z.number().int().positive()).max(50),
});
export type EngagementInput = z.output<typeof engagementInput>;
export type EngagementForm = z.input<typeof engagementInput>;

function isCurrency(code: string): boolean {
  return /^[A-Z]{3}$/.test(code) && Intl.supportedValuesOf('currency').includes(code);
}

/** What the form of a new engagement may choose from. */
export interface EngagementChoices {
  clients: {
    id: number;
    name: string;
    code: string;
    sites: { id: number; name: string; meters: { id: number; label: string }[] }[];
  }[];
  staff: { id: number; name: string; role: string }[];
  timeZones: string[];
  currency: string;
  me: number;
}

/** An engagement in lists. */
export interface EngagementRowView {
  code: string;
  title: string;
  client: string;
  site: string;
  members: string[];
  stations: StationView[];
  standsAt: StationView;
  yearFrom: string;
  yearTo: string;
  /** The reader's own minutes, or all for partners. */
  minutes: number;
}

export const memberInput = z.object({ userId: z.number({ error: 'Choose a person.' }).int().positive() });
