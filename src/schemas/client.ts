import { z } from 'zod';
import { emailInput, personNameInput, type PersonView } from './account';
import { dayInput } from './hour';

/** What a person of a client may do there. */
export const rightsInput = z.object({
  view: z.boolean(),
  record: z.boolean(),
  decide: z.boolean(),
  pay: z.boolean(),
});

/** The rights in words, in the order in which they are shown. */
export const rightWords = {
  view: 'read released editions',
  record: 'record readings',
  decide: 'accept or decline a plan',
} as const;

/** A person to be invited. */
export const personInput = z.discriminatedUnion('role', [
  z.object({ role: z.literal('partner'), name: personNameInput, email: emailInput }),
  z.object({ role: z.literal('consultant'), name: personNameInput, email: emailInput }),
  z.object({
    role: z.literal('client'),
    name: personNameInput,
    email: emailInput,
    clientId: z.number({ error: 'Choose the client.' }).int().positive('Choose the client.'),
    rights: rightsInput,
  }),
]);
export type PersonInput = z.output<typeof personInput>;

const version = z.number().int().min(0);

/** Changes of a person by a partner; each names one thing. */
export const personChangeInput = z.discriminatedUnion('change', [
  z.object({ change: z.literal('name'), name: personNameInput, version }),
  z.object({ change: z.literal('role'), role: z.enum(['partner', 'consultant']), version }),
  z.object({ change: z.literal('rights'), rights: rightsInput, version }),
  z.object({ change: z.literal('access'), closed: z.boolean(), version }),
  z.object({
    change: z.literal('licence'),
    licence: z
      .object({
        jurisdiction: z
          .string()
          .trim()
          .toUpperCase()
          .regex(/^[A-Z]{2}(-[A-Z0-9]{1,3})?$/, 'Write the jurisdiction by its short code, such as IL or DE-BY.'),
        number: z.string().trim().min(3, 'Write the number of the licence.').max(60, 'At most 60 characters.'),
        expires: dayInput.nullable(),
      })
      .nullable(),
    version,
  }),
]);
export type PersonChangeInput = z.output<typeof personChangeInput>;

/** A client in the list. */
export interface ClientRowView {
  id: number;
  name: string;
  city: string | null;
  sites: number;
  people: number;
  engagements: { code: string; title: string }[];
}

/** One client with what belongs to it. */
export interface ClientView {
  id: number;
  name: string;
  city: string | null;
  contact: string | null;
  currency: string;
  sites: {
    id: number;
    name: string;
    place: string | null;
    timeZone: string;
    jurisdiction: string | null;
    meters: { id: number; label: string; serviceVoltageKv: number | null }[];
  }[];
  engagements: { code: string; title: string; yearFrom: string; yearTo: string; siteId: number; meterId: number }[];
  people: PersonView[];
  /** Whether the reader may invite people and change their rights. */
  mayManage: boolean;
}
