/** People on the wire and in forms: roles, addresses, passwords, tokens, invitations. */
import { z } from 'zod';

export const WORKSPACE_ROLES = ['administrator', 'ecologist', 'reviewer', 'observer'] as const;
export type WorkspaceRole = (typeof WORKSPACE_ROLES)[number];

/** What may be granted on a study; its owner is named by the study itself. */
export const STUDY_ROLES = ['contributor', 'reviewer', 'observer'] as const;
export type StudyRole = (typeof STUDY_ROLES)[number];

export const TOKEN_SCOPES = ['read', 'write'] as const;
export type TokenScope = (typeof TOKEN_SCOPES)[number];

export const PASSWORD_MIN = 12;
export const PASSWORD_MAX = 200;

export const Email = z
  .string()
  .trim()
  .toLowerCase()
  .min(1, 'Type an e-mail address.')
  .max(254, 'An e-mail address has at most 254 characters.')
  .pipe(z.email('Type an e-mail address such as name@agency.example.'));

/** Any length a person can type; composition rules make passwords worse, so there are none. */
export const NewPassword = z
  .string()
  .min(PASSWORD_MIN, `Use at least ${PASSWORD_MIN} characters; a few words together are fine.`)
  .max(PASSWORD_MAX, `Use at most ${PASSWORD_MAX} characters.`);

/** Text that a record can hold: no zero character, and no half of a pair. */
const Line = z
  .string()
  .trim()
  .refine((text) => text.isWellFormed() && !text.includes('\0'), 'There is a character in this that cannot be kept.');

export const PersonName = Line.min(1, 'Type a name.').max(120, 'Use at most 120 characters.');

export const SignIn = z.strictObject({
  email: Email,
  password: z
    .string()
    .min(1, 'Type your password.')
    .max(PASSWORD_MAX, `A password has at most ${PASSWORD_MAX} characters.`)
});

export const ResetRequest = z.strictObject({ email: Email });
export const ResetPassword = z.strictObject({ password: NewPassword });

export const Profile = z.strictObject({ name: PersonName });
export const ChangePassword = z.strictObject({
  currentPassword: z.string().min(1, 'Type your present password.').max(PASSWORD_MAX),
  password: NewPassword
});

export const InviteMember = z.strictObject({
  email: Email,
  role: z.enum(WORKSPACE_ROLES, { error: 'Choose one of the four roles.' }).default('ecologist')
});
export const ChangeMemberRole = z.strictObject({ userId: z.string(), role: z.enum(WORKSPACE_ROLES) });
export const RemoveMember = z.strictObject({ userId: z.string() });
/** A row of a settings page that is to be taken back: an invitation, a token, a sign-in. */
export const NamedRow = z.strictObject({ id: z.string() });
export const AcceptInvitation = z.strictObject({ name: PersonName, password: NewPassword });

export const TOKEN_DAYS_MAX = 365;

export const MintToken = z.strictObject({
  name: Line.min(1, 'Say what the token is for.').max(80, 'Use at most 80 characters.'),
  scope: z.enum(TOKEN_SCOPES, { error: 'Choose what the token may do.' }).default('read'),
  // Text, so that the form shows again what was typed; whoever reads it takes its number.
  days: z
    .string()
    .trim()
    .regex(/^\d{1,4}$/, 'Type a whole number of days, such as 90.')
    .refine(
      (days) => Number(days) >= 1 && Number(days) <= TOKEN_DAYS_MAX,
      `A token lasts from 1 to ${TOKEN_DAYS_MAX} days.`
    )
    .default('90')
});

export const ROLE_WORDS: Record<WorkspaceRole, string> = {
  administrator: 'Reads and changes every study, manages members, reads the audit and the mail',
  ecologist: 'Starts studies, reads every study of the workspace, changes those they own or contribute to',
  reviewer: 'Reads and comments on the studies shared with them',
  observer: 'Reads every study of the workspace'
};
