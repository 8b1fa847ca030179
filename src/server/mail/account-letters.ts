interface Words {
  subject: string;
  text: string;
}

const dayOf = (date: Date) =>
  date.toLocaleDateString('en-GB', {
    weekday: 'long',
    day: 'numeric',
    month: 'long',
    year: 'numeric',
    timeZone: 'UTC',
  });

/** The letter with a link for a new password. */
export function resetLetter(given: { name: string; url: string; practice: string }): Words {
  return {
    subject: 'A new password for Counterlag',
    text: [
      `${given.name},`,
      '',
      'somebody, most likely you, asked for a new password. Choose it here within one hour; the link works once:',
      '',
      given.url,
      '',
      'If it was not you, do nothing: your password stays as it is.',
      '',
      given.practice,
      '',
    ].join('\n'),
  };
}

/** The letter that invites a person in. */
export function invitationLetter(given: {
  name: string;
  by: string;
  practice: string;
  url: string;
  expiresAt: Date | null;
}): Words {
  return {
    subject: `${given.by} invites you to Counterlag`,
    text: [
      `${given.name},`,
      '',
      `${given.by} of ${given.practice} has made an account for you in Counterlag, where power bills are audited.`,
      'Choose a password here, and you are in:',
      '',
      given.url,
      '',
      given.expiresAt ? `The link works once, until ${dayOf(given.expiresAt)}.` : 'The link leads to the sign-in.',
      'If you do not know what this is about, do nothing.',
      '',
      given.practice,
      '',
    ].join('\n'),
  };
}
