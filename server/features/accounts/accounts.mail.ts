import { layoutLetter } from '@server/mail/layout';

interface Letter {
  subject: string;
  text: string;
  html: string;
}

export function verificationLetter(data: { name: string; url: string; institute: string }): Letter {
  return {
    subject: 'Confirm your address',
    ...layoutLetter({
      heading: 'Confirm your address',
      paragraphs: [
        `Dear ${data.name},`,
        `somebody, most likely you, opened an account at the ${data.institute} with this address. The link confirms it and signs you in. It is good for two days and for one use.`,
        'If it was not you, do nothing: without the link the account stays closed.',
      ],
      action: { label: 'Confirm the address', url: data.url },
    }),
  };
}

export function knownAddressLetter(data: { name: string; signInUrl: string; resetUrl: string }): Letter {
  return {
    subject: 'You have an account already',
    ...layoutLetter({
      heading: 'You have an account already',
      paragraphs: [
        `Dear ${data.name},`,
        'somebody, most likely you, tried to open an account with this address. There is one already: sign in with it.',
        `If the password is forgotten, ask for a new one at ${data.resetUrl}`,
      ],
      action: { label: 'Sign in', url: data.signInUrl },
    }),
  };
}

export function resetLetter(data: { name: string; url: string }): Letter {
  return {
    subject: 'Set a new password',
    ...layoutLetter({
      heading: 'Set a new password',
      paragraphs: [
        `Dear ${data.name},`,
        'this link sets a new password. It is good for two hours and for one use; all open sessions end with it.',
        'If you did not ask for it, do nothing: your password stays as it is.',
      ],
      action: { label: 'Set a new password', url: data.url },
    }),
  };
}

export function roleInvitationLetter(data: {
  name: string;
  inviter: string;
  role: string;
  scopeTitle: string;
  url: string;
  institute: string;
}): Letter {
  return {
    subject: `Invitation: ${data.role}, ${data.scopeTitle}`,
    ...layoutLetter({
      heading: `${data.role}, ${data.scopeTitle}`,
      paragraphs: [
        `Dear ${data.name},`,
        `${data.inviter} invites you to work on “${data.scopeTitle}” at the ${data.institute} as ${data.role.toLowerCase()}. The link opens your account; it is good for two weeks and for one use.`,
      ],
      action: { label: 'Open the invitation', url: data.url },
    }),
  };
}
