import { z } from 'zod';

/** One plain address: no names, groups or line breaks, so that nothing else can be smuggled into a mail. */
export const emailInput = z
  .string()
  .trim()
  .toLowerCase()
  .max(254, 'An e-mail address has at most 254 characters.')
  .pipe(z.email('Write one e-mail address, such as name@firm.example.'));

/** A new password: long rather than odd. */
export const newPasswordInput = z
  .string()
  .min(12, 'Use at least 12 characters; a few words are easy to keep in mind.')
  .max(200, 'Use at most 200 characters.');

export const signInInput = z.object({
  email: emailInput,
  password: z.string().min(1, 'Write your password.').max(200, 'A password has at most 200 characters.'),
  remember: z.boolean().default(false),
});

export const choosePasswordInput = z
  .object({ password: newPasswordInput, again: z.string() })
  .refine((input) => input.password === input.again, { path: ['again'], message: 'The two passwords differ.' });

/** The name a person goes by: one line. */
export const personNameInput = z
  .string()
  .trim()
  .min(2, 'Write the name, at least two characters.')
  .max(120, 'A name has at most 120 characters.')
  .refine((name) => !hasControl(name), 'Write the name on one line.');

export const resetRequestInput = z.object({ email: emailInput });

export const changePasswordInput = z
  .object({
    old: z.string().min(1, 'Write the password you have today.').max(200, 'A password has at most 200 characters.'),
    password: newPasswordInput,
    again: z.string(),
  })
  .refine((input) => input.password === input.again, { path: ['again'], message: 'The two passwords differ.' })
  .refine((input) => input.password !== input.old, { path: ['password'], message: 'Choose another than the old one.' });

export const profileInput = z.object({ name: personNameInput, version: z.coerce.number().int().min(0) });

function hasControl(text: string): boolean {
  return [...text].some((sign) => sign < ' ' || sign === '\u007f');
}

/**
 * Where to go after signing in: a path of this site, or nothing. Anything a browser could read as another host is refused.
 *
 * @example localPath('/engagements/KG-02/bills?year=1') // => the same; '//elsewhere.example' and '/\\elsewhere.example' give null
 */
export function localPath(next: string | null | undefined): string | null {
  if (!next || next.length > 2000 || !/^\/(?![/\\])/.test(next)) return null;
  if (next.includes('\\') || hasControl(next)) return null;
  const base = 'http://site.invalid';
  if (!URL.canParse(next, base)) return null;
  const url = new URL(next, base);
  if (url.origin !== base || url.pathname.startsWith('//')) return null;
  return url.pathname + url.search + url.hash;
}

/** A licence: who may release, where, until when. */
export interface LicenceView {
  jurisdiction: string;
  number: string;
  expires: string | null;
  checkedById: number | null;
}

/** What a person sees of their own account. */
export interface ProfileView {
  name: string;
  email: string;
  role: 'partner' | 'consultant' | 'client';
  version: number;
  licence: LicenceView | null;
}

/** A person as a partner sees them. */
export interface PersonView extends ProfileView {
  id: number;
  clientId: number | null;
  rights: { view: boolean; record: boolean; decide: boolean; pay: boolean };
  /** `invited`: the account has no password yet. */
  access: 'open' | 'invited' | 'closed';
}

/** Whether a letter went, and if not, why. */
export interface LetterOutcome {
  recipient: string;
  state: 'sent' | 'failed';
  error: string | null;
}
