/** The three studies of the demo, typed in by the commands that a person's click calls. */
import type { StudyQuestion } from '$lib/contracts/study';
import { createStudy } from '../commands/createStudy';
import { openThread } from '../commands/openThread';
import { grantShare } from '../commands/grantShare';
import { recordReading } from '../commands/recordReading';
import { saveQuestion } from '../commands/saveQuestion';
import { saveRate } from '../commands/saveRate';
import { saveRunSettings } from '../commands/saveRunSettings';
import { saveStarts } from '../commands/saveStarts';
import { systemContext, type Context } from '../context';
import { Study } from '../db/models/Study';
import { withTransaction } from '../db/transaction';
import { crayfish } from './crayfish';
import type { DemoStudy } from './demoStudy';
import { goats } from './goats';
import { raftFern } from './raftFern';
import type { DemoPeople } from './seedPeople';

/** A question as it was first typed, where that differs from how it should read. */
type Slip = Partial<StudyQuestion>;

/** Types a study in, page by page. A slip stands in the question until the rates are in, and is then put right. */
async function typeStudy(context: Context, workspaceId: string, demo: DemoStudy, slip: Slip | null): Promise<string> {
  const { studyId } = await createStudy(context, { workspaceId, question: demo.question });
  let revision = 1;
  const step = async (saved: Promise<{ revision: number }>) => {
    revision = (await saved).revision;
  };
  await step(saveStarts(context, { studyId, revision, starts: demo.starts }));
  if (slip) await step(saveQuestion(context, { studyId, revision, question: { ...demo.question, ...slip } }));
  for (const rate of demo.rates) await step(saveRate(context, { studyId, revision, rate }));
  if (slip) await step(saveQuestion(context, { studyId, revision, question: demo.question }));
  await step(saveRunSettings(context, { studyId, revision, run: demo.run }));
  return studyId;
}

/** Makes the studies where the workspace has none at all, deleted ones included; otherwise leaves everything as it is. */
export async function seedStudies(people: DemoPeople): Promise<void> {
  const { workspaceId, actors } = people;
  if ((await Study.count({ where: { workspaceId } })) > 0) return;
  const ecologist = systemContext(actors.ecologist);

  // Revision 3 of the goats takes 640 hectares for square kilometres, a hundred times too much, as happens.
  await typeStudy(ecologist, workspaceId, goats, { area: { value: 640, unit: 'km2' } });

  await typeStudy(ecologist, workspaceId, raftFern, null);

  const studyId = await typeStudy(ecologist, workspaceId, crayfish, null);
  await recordReading(ecologist, {
    studyId,
    part: 'equilibria',
    sentence:
      'At the fitted rates saddleback crayfish take the North Arm from every start; the dose of trapping is not settled by these data.'
  });
  await withTransaction((transaction) =>
    grantShare(ecologist, transaction, { studyId, userId: actors.reviewer.userId, role: 'reviewer' })
  );
  await openThread(systemContext(actors.reviewer), {
    studyId,
    anchor: { kind: 'rate', key: 'competition.alpha12' },
    kind: 'question',
    body: 'This rests on one series in which both species are always together. How far would the answer move if it were one error lower?'
  });
}
