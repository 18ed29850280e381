import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { openStudy } from '../studies/access';

interface Input {
  studyId: string;
}

/** Takes a study out of the list of open ones; it stays readable as it is. */
export async function archiveStudy(context: Context, { studyId }: Input): Promise<void> {
  await setState(context, studyId, 'archived');
}

/** Brings an archived study back whole. */
export async function restoreStudy(context: Context, { studyId }: Input): Promise<void> {
  await setState(context, studyId, 'open');
}

async function setState(context: Context, studyId: string, state: 'open' | 'archived'): Promise<void> {
  const act = state === 'archived' ? 'study.archive' : 'study.restore';
  await withTransaction(async (transaction) => {
    const { study } = await openStudy(context, studyId, act, { transaction, lock: true });
    if (study.state === state) {
      throw refusal('study.stateConflict', { message: `This study is already ${state}.` });
    }
    await study.update({ state, changedAt: context.now() }, { transaction });
    await recordAudit(context, transaction, {
      act,
      subjectType: 'study',
      subjectId: study.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { title: study.title }
    });
  });
}
