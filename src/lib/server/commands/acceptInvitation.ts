import { UniqueConstraintError, type Transaction } from 'sequelize';
import { recordAudit } from '../audit/record';
import { loadActor } from '../auth/loadActor';
import { hashPassword, weaknessOf } from '../auth/passwords';
import { hashSecret } from '../auth/secrets';
import type { Context } from '../context';
import { Invitation } from '../db/models/Invitation';
import { Membership } from '../db/models/Membership';
import { Study } from '../db/models/Study';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { invalid, refusal } from '../errors';
import { can } from '../policies/ability';
import { grantShare } from './grantShare';

export interface NewPerson {
  name: string;
  password: string;
}

export interface Accepted {
  userId: string;
  /** Where the person finds what they were invited to. */
  path: string;
}

/** Whether its sender could still send it: one who has left, or may no longer share the study, asks nobody in. */
async function isStillMeant(invitation: Invitation, transaction?: Transaction): Promise<boolean> {
  const { workspaceId, workspaceRole, studyId } = invitation;
  const sender = await loadActor(invitation.invitedById, 'system', undefined, transaction);
  if (workspaceRole) {
    if (!workspaceId || !can(sender, 'workspace.manageMembers', { kind: 'workspace', workspaceId })) return false;
  }
  if (!studyId) return true;
  const study = await Study.findByPk(studyId, { transaction });
  if (!study || study.deletedAt !== null) return false;
  // No share gives the right to share, so the sender's own need not be looked up.
  const subject = { kind: 'study', workspaceId: study.workspaceId, ownerId: study.ownerId, shares: [] } as const;
  return can(sender, 'study.share', subject);
}

/**
 * The open invitation of a link. Throws 404 when it is unknown, used, withdrawn, past its date, to a study that is deleted,
 * or from somebody who could not send it any more.
 */
export async function findInvitation(context: Context, token: string, transaction?: Transaction): Promise<Invitation> {
  const invitation = await Invitation.findOne({
    where: { tokenHash: hashSecret(token), acceptedAt: null, withdrawnAt: null },
    transaction,
    // Two posts of one link must not both find it open.
    ...(transaction ? { lock: transaction.LOCK.UPDATE } : {})
  });
  if (!invitation || invitation.expiresAt <= context.now()) throw refusal('invitation.notFound');
  if (!(await isStillMeant(invitation, transaction))) throw refusal('invitation.notFound');
  return invitation;
}

async function personOf(
  context: Context,
  transaction: Transaction,
  email: string,
  person: NewPerson | null
): Promise<User> {
  const user = await User.findOne({ where: { email }, transaction });
  if (context.actor) {
    // A link that was passed on must not let in whoever it was passed to.
    if (!user || context.actor.userId !== user.id) throw refusal('invitation.otherPerson');
    return user;
  }
  if (user || !person) throw refusal('invitation.signInFirst');
  const weakness = weaknessOf(person.password, { email, name: person.name });
  if (weakness) throw invalid('password', weakness);
  const passwordHash = await hashPassword(person.password);
  return User.create({ email, name: person.name, passwordHash }, { transaction }).catch((error: unknown) => {
    // Another invitation of the same address was accepted at the same moment.
    if (error instanceof UniqueConstraintError) throw refusal('invitation.signInFirst', { cause: error });
    throw error;
  });
}

async function joinWorkspace(
  context: Context,
  transaction: Transaction,
  invitation: Invitation,
  user: User
): Promise<void> {
  const { workspaceId, workspaceRole: role } = invitation;
  if (!workspaceId || !role) return;
  const [, joined] = await Membership.findOrCreate({
    where: { workspaceId, userId: user.id },
    defaults: { workspaceId, userId: user.id, role },
    transaction
  });
  if (!joined) return;
  await recordAudit(context, transaction, {
    act: 'member.join',
    subjectType: 'user',
    subjectId: user.id,
    workspaceId,
    details: { email: user.email, role },
    by: { userId: user.id, name: user.name }
  });
}

/**
 * Accepts an invitation: as the signed-in person it was sent to, or as somebody new, whose address the link has proved.
 * A role that the person holds already is left as it is. Throws 404 (link), 403 (another person is signed in),
 * 409 (an account exists: sign in), 422 (password).
 */
export async function acceptInvitation(context: Context, token: string, person: NewPerson | null): Promise<Accepted> {
  return withTransaction(async (transaction) => {
    const invitation = await findInvitation(context, token, transaction);
    const user = await personOf(context, transaction, invitation.email, person);
    await invitation.update({ acceptedAt: context.now(), acceptedById: user.id }, { transaction });
    await joinWorkspace(context, transaction, invitation, user);
    const { studyId, studyRole, workspaceId } = invitation;
    if (studyId && studyRole) {
      const actor = await loadActor(user.id, context.actor?.via ?? 'session', undefined, transaction);
      const sharedById = invitation.invitedById;
      await grantShare({ ...context, actor }, transaction, { studyId, userId: user.id, role: studyRole, sharedById });
    }
    await recordAudit(context, transaction, {
      act: 'invitation.accept',
      subjectType: 'invitation',
      subjectId: invitation.id,
      studyId,
      workspaceId,
      details: { email: user.email },
      by: { userId: user.id, name: user.name }
    });
    return { userId: user.id, path: studyId ? `/studies/${studyId}` : '/studies' };
  });
}
