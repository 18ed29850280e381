import { Op } from 'sequelize';
import type { StudyRole } from '$lib/contracts/study';
import type { Context } from '../context';
import { Invitation } from '../db/models/Invitation';
import { StudyShare } from '../db/models/StudyShare';
import { User } from '../db/models/User';
import type { StudyAct } from '../policies/ability';
import { openStudy } from '../studies/access';

export interface SharingView {
  studyId: string;
  title: string;
  owner: { id: string; name: string; email: string };
  shares: { userId: string; name: string; email: string; role: StudyRole; since: string }[];
  /** Sent and not yet accepted, withdrawn or past their date. */
  invitations: { id: string; email: string; role: StudyRole; sentAt: string; expiresAt: string }[];
  abilities: StudyAct[];
}

/** Who has the study and who has been asked in. For those who may share it. */
export async function studySharing(context: Context, studyId: string): Promise<SharingView> {
  const { study, abilities } = await openStudy(context, studyId, 'study.share');
  const [owner, shares, invitations] = await Promise.all([
    User.findByPk(study.ownerId),
    StudyShare.findAll({ where: { studyId: study.id }, order: [['createdAt', 'ASC']] }),
    Invitation.findAll({
      where: { studyId: study.id, acceptedAt: null, withdrawnAt: null, expiresAt: { [Op.gt]: context.now() } },
      order: [['createdAt', 'ASC']]
    })
  ]);
  const people = new Map(
    (await User.findAll({ where: { id: shares.map(({ userId }) => userId) } })).map((user) => [user.id, user])
  );
  return {
    studyId: study.id,
    title: study.title,
    owner: { id: study.ownerId, name: owner?.name ?? '', email: owner?.email ?? '' },
    shares: shares.map(({ userId, role, createdAt }) => ({
      userId,
      name: people.get(userId)?.name ?? '',
      email: people.get(userId)?.email ?? '',
      role,
      since: createdAt.toISOString()
    })),
    invitations: invitations.flatMap(({ id, email, studyRole, createdAt, expiresAt }) =>
      studyRole
        ? [{ id, email, role: studyRole, sentAt: createdAt.toISOString(), expiresAt: expiresAt.toISOString() }]
        : []
    ),
    abilities
  };
}
