/** The letters that Pennyweight sends, as plain text. */
import type { Letter } from './mailer.ts';

export function passwordResetLetter(to: string, link: string): Letter {
  return { to, subject: 'Set a new password for Pennyweight', text: `Someone, probably you, asked to set a new password for this address.\n\nOpen this page within an hour:\n${link}\n\nIf it was not you, nothing has changed and you need not do anything.\n` };
}

export function invitationLetter(to: string, from: string, campaign: string | null, roles: string[], link: string, until: Date): Letter {
  const where = campaign ? `the campaign "${campaign}"` : 'the whole organisation';
  return { to, subject: `${from} invites you to Pennyweight`, text: `${from} invites you as ${roles.join(', ')} to ${where}.\n\nAccept until ${until.toISOString().slice(0, 10)}:\n${link}\n` };
}
