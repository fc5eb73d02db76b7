/**
 * English words of the program in one place, by where they are read. Another language is another file of this shape.
 * In it so far: e-mails about accounts, the cautions that hold until the office has its own, states of an account.
 * `{name}` stands for what is filled in.
 */
export const english = {
  mail: {
    invitation: {
      subject: 'Your account at {port}',
      text: [
        '{by} has set up an account for you in Offing, the wave watch of {port}: {role}.',
        'Choose a passphrase on the page behind the link. Until then nobody can sign in as you.',
      ],
      button: 'Choose your passphrase',
      after: 'The link is good for once, until {until}. After that ask an administrator for a new one.',
    },
    reset: {
      subject: 'A new passphrase for {port}',
      text: [
        '{by} asked for a link with which you choose a new passphrase.',
        'Your passphrase of now stays good until you have chosen another. Whoever is signed in as you is signed out then.',
      ],
      button: 'Choose a new passphrase',
      after:
        'The link is good for once, until {until}. If you did not ask for it, do nothing and tell an administrator.',
    },
    somebody: 'Somebody at the sign-in page',
    foot: 'You receive this as {person}.',
  },
  roles: { admin: 'administrator', operator: 'duty operator', partner: 'partner' },
  cautions: {
    figures:
      'Figures support and never replace the judgement of the master, pilot, coxswain or lifeguard, local notices and licensed practice. Waves well above the significant height occur in every sea. Calm figures do not mean safe bathing.',
    array: 'An array sees the sea where it stands, not the whole coast.',
    traceSpeeds:
      'A trace speed is the apparent speed along one pair of sensors, never a component of the wave vector: it reads too high by 1/cos of its angle to the waves.',
  },
  accountStates: {
    mailOnly: 'only gets e-mails',
    invited: 'invited, has not chosen a passphrase yet',
    linkEnded: 'invited, the link ran out unused',
    active: 'active',
    disabled: 'disabled',
  },
} as const

/** `{name}` by what it stands for; a name that is not given stays as it is written. */
export const filled = (text: string, values: Record<string, string>): string =>
  text.replace(/\{(\w+)\}/g, (whole, name: string) => values[name] ?? whole)
