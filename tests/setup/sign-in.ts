import { demoAccounts } from '@/server/demo-accounts';

/** Signs a person of the demo in over HTTP and gives the session's cookie. */
export async function signInCookie(
  origin: string,
  email: string,
  password: string = demoAccounts.password,
): Promise<string> {
  const body = new URLSearchParams({ email, password });
  const response = await fetch(`${origin}/sign-in`, { method: 'POST', body, headers: { origin }, redirect: 'manual' });
  const cookie = response.headers.getSetCookie().find((one) => one.startsWith('counterlag.sid='));
  if (response.status !== 303 || !cookie) throw new Error(`sign-in of ${email} answered ${response.status}`);
  return cookie.split(';')[0] as string;
}
