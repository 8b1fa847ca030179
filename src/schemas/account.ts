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
