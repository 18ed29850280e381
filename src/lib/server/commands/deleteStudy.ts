import { Op } from 'sequelize';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Study } from '../db/models/Study';
import { withTransaction } from '../db/transaction';
import { openStudy } from '../studies/access';

const DAY_MS = 86_400_000;
/** How long a deleted study can be brought back. */
export const KEEP_DELETED_DAYS = 30;

/** Deletes a study: gone for everybody at once, and back whole with `undeleteStudy` for 30 days. */
export async function deleteStudy(context: Context, { studyId }: { studyId: string }): Promise<void> {
  await withTransaction(async (transaction) => {
    const { study, actor } = await openStudy(context, studyId, 'study.delete', { transaction, lock: true });
    await study.update({ deletedAt: context.now(), deletedById: actor.userId }, { transaction });
    await recordAudit(context, transaction, {
      act: 'study.delete',
      subjectType: 'study',
      subjectId: study.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { title: study.title, revision: study.revision }
    });
  });
}

/** Undoes `deleteStudy`, by those who may delete. */
export async function undeleteStudy(context: Context, { studyId }: { studyId: string }): Promise<void> {
  await withTransaction(async (transaction) => {
    const { study } = await openStudy(context, studyId, 'study.delete', { transaction, lock: true, deleted: true });
    await study.update({ deletedAt: null, deletedById: null }, { transaction });
    await recordAudit(context, transaction, {
      act: 'study.undelete',
      subjectType: 'study',
      subjectId: study.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { title: study.title }
    });
  });
}

/**
 * Removes for good what was deleted more than 30 days ago, with its revisions, threads and shares; the audit stays. Meant
 * for the start of the server and a daily timer. Returns how many went.
 */
export async function purgeDeletedStudies(context: Context): Promise<number> {
  const before = new Date(context.now().getTime() - KEEP_DELETED_DAYS * DAY_MS);
  return withTransaction(async (transaction) => {
    const gone = await Study.findAll({ where: { deletedAt: { [Op.lt]: before } }, transaction });
    for (const study of gone) {
      await study.destroy({ transaction });
      await recordAudit(context, transaction, {
        act: 'study.purge',
        subjectType: 'study',
        subjectId: study.id,
        studyId: study.id,
        workspaceId: study.workspaceId,
        details: { title: study.title }
      });
    }
    return gone.length;
  });
}
