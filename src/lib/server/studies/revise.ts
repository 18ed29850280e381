import type { Transaction } from 'sequelize';
import { StudyContent } from '$lib/contracts/content';
import { StudyQuestion } from '$lib/contracts/study';
import type { Change, Saved } from '$lib/contracts/views';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Study } from '../db/models/Study';
import { StudyRevision } from '../db/models/StudyRevision';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { invalid, refusal } from '../errors';
import { openStudy, readRevision, requireLiving, requireOpen } from './access';
import { changesBetween, summaryOf } from './changes';
import { fingerprintOf } from './fingerprint';
import { listFields } from './listFields';
import { parseInput } from './parseInput';
import { surroundingsOf } from './surroundings';

export interface Text {
  question: StudyQuestion;
  content: StudyContent;
}

export interface Edit {
  studyId: string;
  /** The revision the screen was drawn from, as a number or as a form posts it. */
  revision: unknown;
  /** Makes the new text out of the present one, or throws 422. Runs after authorisation. */
  change(current: Text, study: Study): Text | Promise<Text>;
  /** In front of the plain words of what changed, such as "Back to revision 3". */
  lead?: string;
}

/**
 * The one way in which what a study says is changed: authorised, checked against what was saved meanwhile, written as a
 * new revision with the list row and the audit in one transaction.
 *
 * The results are worked out before the transaction, so that no row is held while the engine runs; the row is then locked
 * and must still be at the revision that the new one was made from.
 */
export async function revise(context: Context, edit: Edit): Promise<Saved> {
  const { study, actor } = await openStudy(context, edit.studyId, 'study.edit');
  requireOpen(study);
  const base = await readRevision(study);
  const from =
    typeof edit.revision === 'string' && /^\d{1,9}$/.test(edit.revision) ? Number(edit.revision) : edit.revision;
  if (typeof from !== 'number' || !Number.isInteger(from) || from < 1 || from > base.number) {
    throw invalid('revision', 'Say which revision this change was made from.');
  }
  if (from !== base.number) throw await overtaken(study, base, from);

  const next = await edit.change({ question: base.question, content: base.content }, study);
  const question = parseInput(StudyQuestion, next.question, 'question');
  const content = parseInput(StudyContent, next.content, 'content');
  const fingerprint = fingerprintOf({ question, content });
  const changed = changesBetween(base, { question, content });
  if (fingerprint === base.fingerprint || changed.length === 0) {
    return { studyId: study.id, revision: base.number, fingerprint: base.fingerprint, summary: '', changed: [] };
  }
  const summary = [edit.lead, summaryOf(changed)].filter(Boolean).join(': ');
  const fields = listFields({ question, content, fingerprint, around: await surroundingsOf(study.id) });

  return withTransaction(async (transaction) => {
    await study.reload({ transaction, lock: transaction.LOCK.UPDATE });
    requireLiving(study);
    if (study.revision !== base.number)
      throw await overtaken(study, await readRevision(study, undefined, transaction), base.number, transaction);
    const number = base.number + 1;
    await StudyRevision.create(
      {
        studyId: study.id,
        number,
        question,
        content,
        fingerprint,
        summary,
        authorId: actor.userId,
        createdAt: context.now()
      },
      { transaction }
    );
    await study.update({ ...fields, revision: number, changedAt: context.now() }, { transaction });
    await recordAudit(context, transaction, {
      act: 'study.edit',
      subjectType: 'study',
      subjectId: study.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { revision: number, fingerprint, summary, changed }
    });
    return { studyId: study.id, revision: number, fingerprint, summary, changed };
  });
}

/** The 409 that tells what was saved since the screen was drawn, so that nothing is lost and nothing overwritten unseen. */
async function overtaken(study: Study, latest: StudyRevision, from: number, transaction?: Transaction) {
  const old = await StudyRevision.findOne({ where: { studyId: study.id, number: from }, transaction });
  const author = await User.findByPk(latest.authorId, { attributes: ['name'], transaction });
  const changes: Change[] = old ? changesBetween(old, latest) : [];
  const what = changes.length ? summaryOf(changes) : latest.summary;
  return refusal('study.stale', {
    latestRevision: latest.number,
    message: `${author?.name ?? 'Somebody'} saved revision ${latest.number} after you opened revision ${from}: ${what} Look at it, then save yours again.`,
    issues: changes.map((change) => ({
      path: change.path,
      message: `${change.label}: ${change.before ?? 'nothing'} before, ${change.after ?? 'nothing'} now.`
    }))
  });
}
