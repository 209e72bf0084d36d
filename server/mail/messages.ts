import type { TeamRole } from '../../shared/types/roles.js';
import type { MailMessage } from '../app-context.js';

const ROLE_PHRASES: Readonly<Record<TeamRole, string>> = { chemist: 'a chemist', lead: 'a lead', reader: 'a reader' };

/** Names come from people: a line break in one must not start a new header or paragraph. */
const oneLine = (text: string): string => text.replace(/\s+/g, ' ').trim();
const day = (date: Date): string => `${date.toISOString().slice(0, 16).replace('T', ' ')} UTC`;

export function invitationMessage(invitation: {
  readonly email: string;
  readonly teamName: string;
  readonly role: TeamRole;
  readonly invitedBy: string;
  readonly link: string;
  readonly expiresAt: Date;
}): MailMessage {
  const teamName = oneLine(invitation.teamName);
  return {
    to: invitation.email,
    subject: `Invitation to ${teamName} in Isoloom`,
    text: [
      `${oneLine(invitation.invitedBy)} invites you to join the team ${teamName} in Isoloom as ${ROLE_PHRASES[invitation.role]}.`,
      `Open this link to join:\n${invitation.link}`,
      `The link works once, until ${day(invitation.expiresAt)}. If you did not expect this mail, you can ignore it.`,
    ].join('\n\n'),
  };
}

export function passwordResetMessage(reset: { readonly email: string; readonly link: string; readonly expiresAt: Date }): MailMessage {
  return {
    to: reset.email,
    subject: 'Set a new password for Isoloom',
    text: [
      'Somebody, probably you, asked to set a new password for your account in Isoloom.',
      `Open this link to set it:\n${reset.link}`,
      `The link works once, until ${day(reset.expiresAt)}. If it was not you, ignore this mail: your password stays as it is.`,
    ].join('\n\n'),
  };
}
