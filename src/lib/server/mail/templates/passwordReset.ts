import { layOut } from '../layout';
import type { Mail } from '../send';

/** The link to set a new password. */
export function passwordResetMail(facts: { to: string; name: string; token: string }): Mail {
  return layOut({
    to: facts.to,
    subject: 'Set a new password',
    paragraphs: [
      `${facts.name}, somebody asked to set a new password for your account. The link below holds for one hour and can be used once.`,
      'When the new password is set, every browser that is signed in with the old one is signed out.'
    ],
    link: { words: 'Set a new password', path: `/reset/${facts.token}` },
    because:
      'You get this because your address was typed at the sign-in page; this kind of mail cannot be switched off. If it was not you, leave it: your password stays as it is.'
  });
}

/** Tells the owner of an account that its password has changed. */
export function passwordChangedMail(facts: { to: string; name: string }): Mail {
  return layOut({
    to: facts.to,
    subject: 'Your password was changed',
    paragraphs: [`${facts.name}, the password of your account was changed and other browsers were signed out.`],
    link: { words: 'If it was not you, set a new one now', path: '/reset' },
    because: 'You get this because you have an account; this kind of mail cannot be switched off.'
  });
}
