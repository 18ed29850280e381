/** Studies for tests, made by the commands that a person's click calls. */
import type { RateEntry, RatePath, Start } from '$lib/contracts/content';
import type { StudyQuestion, StudyRole } from '$lib/contracts/study';
import { createStudy } from '$lib/server/commands/createStudy';
import { grantShare } from '$lib/server/commands/grantShare';
import { saveRate } from '$lib/server/commands/saveRate';
import { saveStarts } from '$lib/server/commands/saveStarts';
import { systemContext, type Context } from '$lib/server/context';
import { withTransaction } from '$lib/server/db/transaction';

export const competitionQuestion: StudyQuestion = {
  title: 'Two newts of Ash Pond',
  place: 'Ash Pond, Quillmere Levels',
  area: { value: 2, unit: 'har' },
  interaction: 'competition',
  first: { common: 'banded newt', scientific: 'Salamandridae', counted: 'adults', unit: '{ind}/har' },
  second: { common: 'crested newt', scientific: 'Salamandridae', counted: 'adults', unit: '{ind}/har' },
  protects: 'first',
  timeUnit: 'a',
  horizon: 25,
  objective: 'Whether both newts stay in the pond.',
  acceptableRisk: 10
};

export const consumerQuestion: StudyQuestion = {
  ...competitionQuestion,
  title: 'Hares and sedge of Low Bank',
  place: 'Low Bank, Quillmere Levels',
  interaction: 'consumer-resource',
  first: { common: 'bank sedge', scientific: 'Cyperaceae', counted: 'dry mass', unit: 'kg/har' },
  second: { common: 'bank hare', scientific: 'Leporidae', counted: 'adults', unit: '{ind}/har' }
};

/** A rate as it would be typed; only what a test is about need be said. */
export function typedRate(path: RatePath, value: number, unit: string, rest: Partial<RateEntry> = {}): RateEntry {
  return {
    path,
    value,
    unit,
    form: 'plain',
    uncertainty: { kind: 'cv', percent: 10 },
    source: { kind: 'own survey', text: 'Pond counts 2020 to 2024' },
    note: '',
    overrideReason: '',
    ...rest
  };
}

/** Two competitors that coexist: r 0.9 and 0.6, K 420 and 310, each harming the other less than itself. */
export const competitionRates: readonly RateEntry[] = [
  typedRate('first.growth.r', 0.9, '/a'),
  typedRate('first.growth.K', 420, '{ind}/har'),
  typedRate('second.growth.r', 0.6, '/a'),
  typedRate('second.growth.K', 310, '{ind}/har'),
  typedRate('competition.alpha12', 0.7, '1'),
  typedRate('competition.alpha21', 0.5, '1')
];

export const today: Start = { label: 'Today', x: 100, y: 50, source: 'Pond counts 2024' };

export interface BuildStudy {
  question?: StudyQuestion;
  rates?: readonly RateEntry[];
  starts?: readonly Start[];
  shares?: readonly { userId: string; role: StudyRole }[];
  workspaceId?: string;
}

/** A study of the context's actor with rates and a start, unless told otherwise. Returns its id and latest revision. */
export async function buildStudy(
  owner: Context,
  build: BuildStudy = {}
): Promise<{ studyId: string; revision: number }> {
  const { question = competitionQuestion, rates = competitionRates, starts = [today], shares = [] } = build;
  const { studyId } = await createStudy(owner, {
    question,
    ...(build.workspaceId ? { workspaceId: build.workspaceId } : {})
  });
  let revision = 1;
  for (const rate of rates) ({ revision } = await saveRate(owner, { studyId, revision, rate }));
  if (starts.length > 0) ({ revision } = await saveStarts(owner, { studyId, revision, starts }));
  for (const share of shares) {
    await withTransaction((transaction) => grantShare(systemContext(owner.actor), transaction, { studyId, ...share }));
  }
  return { studyId, revision };
}
