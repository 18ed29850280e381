import { z } from 'zod';
import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { Reading } from '../db/models/Reading';
import { withTransaction } from '../db/transaction';
import { openStudy, readRevision, requireLiving, requireOpen } from '../studies/access';
import { inputsFingerprint } from '../studies/fingerprint';
import { listFields } from '../studies/listFields';
import { parseInput } from '../studies/parseInput';
import { requireResult } from '../studies/requireResult';
import { surroundingsOf } from '../studies/surroundings';

const Input = z.strictObject({
  part: z.enum(['equilibria', 'trajectories'], { error: 'Choose Equilibria or Trajectories.' }),
  sentence: z
    .string({ error: 'Say in a sentence what the result says.' })
    .trim()
    .min(1, { error: 'Say in a sentence what the result says.' })
    .max(400, { error: 'Keep the reading under 400 characters.' })
});

/** Records what an author reads from a result, tied to the inputs of this moment: when they change, the part is stale. */
export async function recordReading(
  context: Context,
  input: { studyId: string; part: unknown; sentence: unknown }
): Promise<void> {
  const { study, actor } = await openStudy(context, input.studyId, 'study.edit');
  requireOpen(study);
  const { part, sentence } = parseInput(Input, { part: input.part, sentence: input.sentence });
  const { number, question, content, fingerprint: textFingerprint } = await readRevision(study);
  requireResult(question, content, part);
  const fingerprint = inputsFingerprint(part, question, content);
  await withTransaction(async (transaction) => {
    await study.reload({ transaction, lock: transaction.LOCK.UPDATE });
    requireLiving(study);
    const reading = await Reading.create(
      {
        studyId: study.id,
        part,
        fingerprint,
        revision: number,
        sentence,
        userId: actor.userId,
        createdAt: context.now()
      },
      { transaction }
    );
    // Somebody may have saved in between: their row already tells the truth about the parts, so it is left to them.
    if (study.revision === number) {
      const around = await surroundingsOf(study.id, transaction);
      await study.update(listFields({ question, content, fingerprint: textFingerprint, around }), { transaction });
    }
    await recordAudit(context, transaction, {
      act: 'study.recordReading',
      subjectType: 'reading',
      subjectId: reading.id,
      studyId: study.id,
      workspaceId: study.workspaceId,
      details: { part, sentence, revision: number, fingerprint }
    });
  });
}
