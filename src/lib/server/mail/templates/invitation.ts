import type { StudyRole, WorkspaceRole } from '$lib/contracts/people';
import { layOut } from '../layout';
import type { Mail } from '../send';

const MAY_STUDY: Record<StudyRole, string> = {
  contributor: 'read it, change it and comment on it',
  reviewer: 'read every part of it and comment; you cannot change it',
  observer: 'read it'
};

const MAY_WORKSPACE: Record<WorkspaceRole, string> = {
  administrator: 'see to its members and do everything in its studies',
  ecologist: 'start studies of your own and read those of your colleagues',
  reviewer: 'read and comment on the studies that are shared with you',
  observer: 'read its studies'
};

export interface InvitationFacts {
  to: string;
  invitedBy: string;
  workspaceName: string | null;
  workspaceRole: WorkspaceRole | null;
  studyTitle: string | null;
  studyRole: StudyRole | null;
  /** The secret of the link. */
  token: string;
  expiresAt: Date;
}

/** The day and time with its zone, the same on every machine. */
export function inUtc(instant: Date): string {
  const day = instant.toLocaleDateString('en-GB', { day: 'numeric', month: 'long', year: 'numeric', timeZone: 'UTC' });
  const time = instant.toLocaleTimeString('en-GB', { hour: '2-digit', minute: '2-digit', timeZone: 'UTC' });
  return `${day}, ${time} (UTC)`;
}

/** Asks somebody into a workspace, to a study, or both. */
export function invitationMail(facts: InvitationFacts): Mail {
  const { studyRole, workspaceRole } = facts;
  const asked: string[] = [];
  if (studyRole) {
    const study = facts.studyTitle ? `the study “${facts.studyTitle}”` : 'a study';
    asked.push(`${facts.invitedBy} invites you to ${study} as its ${studyRole}. You may ${MAY_STUDY[studyRole]}.`);
  }
  if (workspaceRole) {
    const where = `the workspace ${facts.workspaceName ?? ''}`.trim();
    const article = workspaceRole === 'reviewer' ? 'a' : 'an';
    asked.push(
      `${facts.invitedBy} invites you into ${where} as ${article} ${workspaceRole}. You may ${MAY_WORKSPACE[workspaceRole]}.`
    );
  }
  return layOut({
    to: facts.to,
    subject: studyRole
      ? `Invitation: ${facts.studyTitle ?? 'a study'}, as ${studyRole}`
      : `Invitation into ${facts.workspaceName ?? 'a workspace'}`,
    paragraphs: [...asked, `The invitation holds until ${inUtc(facts.expiresAt)} and can be used once.`],
    link: { words: 'Accept the invitation', path: `/invitations/${facts.token}` },
    because: `You get this because ${facts.invitedBy} typed your address; this kind of mail cannot be switched off. If you do not know them, leave it: nothing happens.`
  });
}
