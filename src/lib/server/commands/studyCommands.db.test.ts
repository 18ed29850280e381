import { beforeAll, describe, expect, it } from 'vitest';
import { buildTeam, type Team } from '../../../../tests/harness/factories/actors';
import {
  buildStudy,
  competitionQuestion,
  competitionRates,
  today,
  typedRate
} from '../../../../tests/harness/factories/studies';
import { systemContext, type Context } from '../context';
import { sequelize } from '../db/connection';
import { AuditEvent } from '../db/models/AuditEvent';
import { Study } from '../db/models/Study';
import { StudyRevision } from '../db/models/StudyRevision';
import { AppError } from '../errors';
import { archiveStudy, restoreStudy } from './archiveStudy';
import { changeShare } from './changeShare';
import { createStudy } from './createStudy';
import { deleteStudy, KEEP_DELETED_DAYS, purgeDeletedStudies, undeleteStudy } from './deleteStudy';
import { duplicateStudy } from './duplicateStudy';
import { openThread } from './openThread';
import { recordReading } from './recordReading';
import { removeRate } from './removeRate';
import { replyToThread } from './replyToThread';
import { resolveThread } from './resolveThread';
import { restoreRevision } from './restoreRevision';
import { revokeShare } from './revokeShare';
import { saveAssumptions } from './saveAssumptions';
import { saveQuestion } from './saveQuestion';
import { saveRate } from './saveRate';
import { saveRunSettings } from './saveRunSettings';
import { saveStarts } from './saveStarts';
import { saveStructure } from './saveStructure';
import { shareStudy } from './shareStudy';

let team: Team;
let studyId: string;
let revision: number;
let threadId: string;

beforeAll(async () => {
  team = await buildTeam();
  ({ studyId, revision } = await buildStudy(team.owner.context, {
    shares: [
      { userId: team.reviewer.userId, role: 'reviewer' },
      { userId: team.nobody.userId, role: 'contributor' }
    ]
  }));
  ({ threadId } = await openThread(team.owner.context, {
    studyId,
    anchor: { kind: 'study' },
    kind: 'note',
    body: 'Begun.'
  }));
});

async function refused(attempt: Promise<unknown>): Promise<AppError> {
  const thrown = await attempt.then(
    () => null,
    (error: unknown) => error
  );
  if (!(thrown instanceof AppError)) throw new Error(`expected a refusal, got ${String(thrown)}`);
  return thrown;
}

/** Every row that a study command can touch, as one text. */
async function rows(): Promise<string> {
  const tables = ['studies', 'study_revisions', 'study_shares', 'readings', 'threads', 'comments', 'invitations'];
  const parts = await Promise.all(
    tables.map(async (table) => {
      const [found] = await sequelize().query(`select * from ${table} order by id`);
      return JSON.stringify(found);
    })
  );
  return parts.join('\n') + (await AuditEvent.count());
}

interface Case {
  name: string;
  run: (context: Context) => Promise<unknown>;
  /** Readers who may not: each standing that must meet 403. */
  forbidden: readonly ('colleague' | 'reviewer' | 'observer')[];
  /** The same with something that cannot be used, and the path it must name. */
  invalid?: { run: (context: Context) => Promise<unknown>; path: string };
}

const readers = ['colleague', 'reviewer', 'observer'] as const;
const cases: Case[] = [
  {
    name: 'saveQuestion',
    run: (c) => saveQuestion(c, { studyId, revision, question: { ...competitionQuestion, horizon: 30 } }),
    forbidden: readers,
    invalid: {
      run: (c) =>
        saveQuestion(c, { studyId, revision, question: { ...competitionQuestion, area: { value: -1, unit: 'har' } } }),
      path: 'question.area.value'
    }
  },
  {
    name: 'saveStructure',
    run: (c) => saveStructure(c, { studyId, revision, structure: { ...structure(), competition: 'encounters' } }),
    forbidden: readers,
    invalid: {
      run: (c) =>
        saveStructure(c, {
          studyId,
          revision,
          structure: { ...structure(), first: { ...structure().first, growth: 'exponential' } }
        }),
      path: 'structure.first.growth'
    }
  },
  {
    name: 'saveRate',
    run: (c) => saveRate(c, { studyId, revision, rate: typedRate('first.growth.r', 0.8, '/a') }),
    forbidden: readers,
    invalid: {
      run: (c) => saveRate(c, { studyId, revision, rate: typedRate('first.growth.K', 420, 'kg/har') }),
      path: 'rate.unit'
    }
  },
  {
    name: 'removeRate',
    run: (c) => removeRate(c, { studyId, revision, path: 'first.growth.r' }),
    forbidden: readers,
    invalid: { run: (c) => removeRate(c, { studyId, revision, path: 'first.growth.q' }), path: 'path' }
  },
  {
    name: 'saveStarts',
    run: (c) => saveStarts(c, { studyId, revision, starts: [{ ...today, x: 120 }] }),
    forbidden: readers,
    invalid: {
      run: (c) => saveStarts(c, { studyId, revision, starts: [today, { ...today, y: Number.NaN }] }),
      path: 'starts.1.y'
    }
  },
  {
    name: 'saveRunSettings',
    run: (c) => saveRunSettings(c, { studyId, revision, run: { ...run(), span: 40 } }),
    forbidden: readers,
    invalid: { run: (c) => saveRunSettings(c, { studyId, revision, run: { ...run(), rtol: 1 } }), path: 'run.rtol' }
  },
  {
    name: 'saveAssumptions',
    run: (c) =>
      saveAssumptions(c, { studyId, revision, assumptions: [{ key: 'closed', accepted: true, comment: '' }] }),
    forbidden: readers,
    invalid: {
      run: (c) => saveAssumptions(c, { studyId, revision, assumptions: [{ key: 'closed', accepted: 'yes' }] }),
      path: 'assumptions.0.accepted'
    }
  },
  { name: 'restoreRevision', run: (c) => restoreRevision(c, { studyId, revision, number: 2 }), forbidden: readers },
  {
    name: 'recordReading',
    run: (c) => recordReading(c, { studyId, part: 'equilibria', sentence: 'Both stay.' }),
    forbidden: readers,
    invalid: { run: (c) => recordReading(c, { studyId, part: 'risk', sentence: 'x' }), path: 'part' }
  },
  {
    name: 'duplicateStudy',
    run: (c) => duplicateStudy(c, { studyId }),
    forbidden: ['reviewer', 'observer']
  },
  { name: 'archiveStudy', run: (c) => archiveStudy(c, { studyId }), forbidden: readers },
  { name: 'deleteStudy', run: (c) => deleteStudy(c, { studyId }), forbidden: readers },
  {
    name: 'shareStudy',
    run: (c) => shareStudy(c, { studyId, email: 'new@agency.example', role: 'reviewer' }),
    forbidden: readers,
    invalid: { run: (c) => shareStudy(c, { studyId, email: 'nobody', role: 'reviewer' }), path: 'email' }
  },
  {
    name: 'changeShare',
    run: (c) => changeShare(c, { studyId, userId: team.reviewer.userId, role: 'observer' }),
    forbidden: readers,
    invalid: { run: (c) => changeShare(c, { studyId, userId: team.reviewer.userId, role: 'owner' }), path: 'role' }
  },
  {
    name: 'revokeShare',
    run: (c) => revokeShare(c, { studyId, userId: team.reviewer.userId }),
    forbidden: readers
  },
  {
    name: 'openThread',
    run: (c) => openThread(c, { studyId, anchor: { kind: 'study' }, kind: 'question', body: 'Why?' }),
    forbidden: ['observer'],
    invalid: {
      run: (c) => openThread(c, { studyId, anchor: { kind: 'rate', key: 'first.growth.q' }, kind: 'note', body: 'x' }),
      path: 'anchor.key'
    }
  },
  {
    name: 'replyToThread',
    run: (c) => replyToThread(c, { studyId, threadId, body: 'Because.' }),
    forbidden: ['observer'],
    invalid: { run: (c) => replyToThread(c, { studyId, threadId, body: '  ' }), path: 'body' }
  },
  {
    name: 'resolveThread',
    run: (c) => resolveThread(c, { studyId, threadId, resolved: true }),
    forbidden: readers
  }
];

const structure = () => ({
  interaction: 'competition',
  first: { growth: 'logistic', effort: false, quota: false, stocking: false },
  second: { growth: 'logistic', selfLimitation: false, effort: false, quota: false, stocking: false },
  competition: 'coefficients',
  feeding: { response: 'holling-2', interference: false }
});
const run = () => ({ span: 25, samples: 201, rtol: 1e-8, atol: 1e-10, thresholds: [] });

describe('a refusal of a study command', () => {
  it.each(cases)('$name: 401, 404, 403, 422, and no row has changed', async ({ run, forbidden, invalid }) => {
    const before = await rows();
    expect((await refused(run(systemContext(null)))).status).toBe(401);
    expect((await refused(run(team.outsider.context))).status).toBe(404);
    for (const standing of forbidden) {
      const refusal = await refused(run(team[standing].context));
      expect([standing, refusal.status]).toEqual([standing, 403]);
    }
    if (invalid) {
      const refusal = await refused(invalid.run(team.owner.context));
      expect(refusal.status).toBe(422);
      expect(refusal.issues.map(({ path }) => path)).toContain(invalid.path);
    }
    expect(await rows()).toBe(before);
  });

  it('is 404 for an id that is no id, and for a study that was never made', async () => {
    for (const id of ['nonsense', '00000000-0000-4000-8000-000000000000']) {
      expect((await refused(archiveStudy(team.owner.context, { studyId: id }))).status).toBe(404);
    }
  });
});

describe('createStudy', () => {
  it('is refused to those who only read, names the bad field, and writes one revision with its audit', async () => {
    const question = competitionQuestion;
    for (const someone of [team.reviewer, team.observer]) {
      expect((await refused(createStudy(someone.context, { question }))).status).toBe(403);
    }
    expect((await refused(createStudy(systemContext(null), { question }))).status).toBe(401);
    const bad = await refused(createStudy(team.owner.context, { question: { ...question, first: {} } }));
    expect(bad.issues.map(({ path }) => path)).toContain('question.first.common');
    const elsewhere = createStudy(team.outsider.context, { question, workspaceId: team.workspaceId });
    expect((await refused(elsewhere)).status).toBe(404);

    const made = await createStudy(team.owner.context, { question });
    const study = await Study.findByPk(made.studyId);
    expect(study).toMatchObject({
      title: question.title,
      revision: 1,
      verdictKind: 'none',
      ownerId: team.owner.userId
    });
    expect(await StudyRevision.count({ where: { studyId: made.studyId } })).toBe(1);
    expect(await AuditEvent.findAll({ where: { studyId: made.studyId } })).toMatchObject([{ act: 'study.create' }]);
  });
});

describe('text that cannot be kept', () => {
  it('is refused by its path: a zero character and half of a pair', async () => {
    for (const title of ['Newts\u0000', 'Newts \ud83d']) {
      const refusal = await refused(createStudy(team.owner.context, { question: { ...competitionQuestion, title } }));
      expect([refusal.status, refusal.issues.map(({ path }) => path)]).toEqual([422, ['question.title']]);
    }
    const rate = typedRate('first.growth.r', 0.8, '/a', { note: 'a\u0000b' });
    const refusal = await refused(saveRate(team.owner.context, { studyId, revision, rate }));
    expect(refusal.issues.map(({ path }) => path)).toEqual(['rate.note']);
  });
});

describe('a save', () => {
  it('makes a revision that says what changed, and leaves the one before untouched', async () => {
    const { owner } = team;
    const study = await buildStudy(owner.context);
    const saved = await saveRate(owner.context, { ...study, rate: typedRate('first.growth.r', 0.75, '/a') });
    expect(saved.revision).toBe(study.revision + 1);
    expect(saved.changed).toMatchObject([{ path: 'rates.first.growth.r' }]);
    expect(saved.summary).toMatch(/r₁.*0\.9.*now 0\.75/);
    const revisions = await StudyRevision.findAll({ where: { studyId: study.studyId }, order: ['number'] });
    expect(revisions.at(-2)?.content.rates[0]?.value).toBe(0.9);
    expect(revisions.at(-1)?.content.rates[0]?.value).toBe(0.75);
    expect(await Study.findByPk(study.studyId)).toMatchObject({ revision: saved.revision, verdictKind: 'coexistence' });
  });

  it('of what is already there makes no revision', async () => {
    const study = await buildStudy(team.owner.context);
    const [first] = competitionRates;
    const saved = await saveRate(team.owner.context, { ...study, rate: first });
    expect(saved).toMatchObject({ revision: study.revision, changed: [] });
    expect(await StudyRevision.count({ where: { studyId: study.studyId } })).toBe(study.revision);
  });

  it('from an overtaken revision is 409, says who changed what, and loses nothing', async () => {
    const study = await buildStudy(team.owner.context);
    await saveRate(team.owner.context, { ...study, rate: typedRate('first.growth.K', 400, '{ind}/har') });
    const refusal = await refused(
      saveRate(team.administrator.context, { ...study, rate: typedRate('first.growth.K', 390, '{ind}/har') })
    );
    expect(refusal).toMatchObject({ code: 'study.stale', status: 409 });
    expect(refusal.message).toContain('Test ecologist');
    expect(refusal.issues).toMatchObject([{ path: 'rates.first.growth.K' }]);
    expect(refusal.issues[0]?.message).toMatch(/420.*before.*400.*now/);
  });

  it('of two at the same moment lets one through and refuses the other', async () => {
    const study = await buildStudy(team.owner.context);
    const attempts = [0.71, 0.72, 0.73].map((value) =>
      saveRate(team.owner.context, { ...study, rate: typedRate('first.growth.r', value, '/a') })
    );
    const settled = await Promise.allSettled(attempts);
    expect(settled.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    for (const result of settled) {
      if (result.status === 'rejected') expect(result.reason).toMatchObject({ code: 'study.stale', status: 409 });
    }
    expect(await StudyRevision.count({ where: { studyId: study.studyId } })).toBe(study.revision + 1);
  });

  it('is refused while the study is archived, and possible again after', async () => {
    const { owner } = team;
    const study = await buildStudy(owner.context);
    const change = () => saveRate(owner.context, { ...study, rate: typedRate('first.growth.r', 0.7, '/a') });
    await archiveStudy(owner.context, study);
    expect(await refused(change())).toMatchObject({ code: 'study.archived', status: 409 });
    expect((await refused(archiveStudy(owner.context, study))).status).toBe(409);
    await restoreStudy(owner.context, study);
    expect((await change()).revision).toBe(study.revision + 1);
  });

  it('takes the crowding form, and refuses it without its capacity', async () => {
    const { owner } = team;
    const study = await buildStudy(owner.context, { rates: [] });
    const crowding = typedRate('first.growth.r', 0.9 / 420, 'har/{ind}/a', { form: 'crowding' });
    const refusal = await refused(saveRate(owner.context, { ...study, rate: crowding }));
    expect(refusal.issues).toMatchObject([{ path: 'rate.form' }]);
    const { revision: next } = await saveRate(owner.context, {
      ...study,
      rate: typedRate('first.growth.K', 420, '{ind}/har')
    });
    const saved = await saveRate(owner.context, { studyId: study.studyId, revision: next, rate: crowding });
    expect(saved.changed).toMatchObject([{ path: 'rates.first.growth.r' }]);
  });
});

describe('undo', () => {
  it('restoreRevision makes an old text the newest and keeps what it replaces', async () => {
    const { owner } = team;
    const study = await buildStudy(owner.context);
    const { revision: changed } = await saveRate(owner.context, {
      ...study,
      rate: typedRate('first.growth.r', 0.2, '/a')
    });
    const saved = await restoreRevision(owner.context, {
      studyId: study.studyId,
      revision: changed,
      number: study.revision
    });
    expect(saved.revision).toBe(changed + 1);
    expect(saved.summary).toMatch(new RegExp(`^Back to revision ${study.revision}:`));
    const numbers = await StudyRevision.findAll({ where: { studyId: study.studyId }, order: ['number'] });
    expect(numbers.at(-1)?.fingerprint).toBe(numbers.at(-3)?.fingerprint);
    const none = restoreRevision(owner.context, { studyId: study.studyId, revision: saved.revision, number: 99 });
    expect((await refused(none)).status).toBe(404);
  });

  it('undeleteStudy brings a deleted study back whole', async () => {
    const { owner, administrator, outsider, colleague } = team;
    const study = await buildStudy(owner.context);
    await deleteStudy(owner.context, study);
    expect((await refused(archiveStudy(administrator.context, study))).status).toBe(404);
    expect((await refused(undeleteStudy(outsider.context, study))).status).toBe(404);
    expect((await refused(undeleteStudy(colleague.context, study))).status).toBe(404);
    await undeleteStudy(owner.context, study);
    expect(await StudyRevision.count({ where: { studyId: study.studyId } })).toBe(study.revision);
    await archiveStudy(administrator.context, study);
  });
});

describe('purgeDeletedStudies', () => {
  it('removes what was deleted more than thirty days ago, and nothing else; the audit stays', async () => {
    const gone = await buildStudy(team.owner.context);
    const kept = await buildStudy(team.owner.context);
    await deleteStudy(team.owner.context, gone);
    const after = (days: number) => systemContext(null, () => new Date(Date.now() + days * 86_400_000));
    expect(await purgeDeletedStudies(after(KEEP_DELETED_DAYS - 1))).toBe(0);
    expect(await purgeDeletedStudies(after(KEEP_DELETED_DAYS + 1))).toBe(1);
    expect(await Study.findByPk(gone.studyId)).toBeNull();
    expect(await StudyRevision.count({ where: { studyId: gone.studyId } })).toBe(0);
    expect(await Study.findByPk(kept.studyId)).not.toBeNull();
    const acts = (await AuditEvent.findAll({ where: { studyId: gone.studyId } })).map(({ act }) => act);
    expect(acts).toEqual(expect.arrayContaining(['study.create', 'study.delete', 'study.purge']));
  });
});

describe('the database itself', () => {
  it('refuses to rewrite or remove a revision of a living study, and lets them go with the study', async () => {
    const study = await buildStudy(team.owner.context, { rates: [], starts: [] });
    const where = { studyId: study.studyId };
    await expect(StudyRevision.update({ summary: 'Nothing happened.' }, { where })).rejects.toThrow(/kept as it was/);
    await expect(StudyRevision.destroy({ where })).rejects.toThrow(/kept as it was/);
    await Study.destroy({ where: { id: study.studyId } });
    expect(await StudyRevision.count({ where })).toBe(0);
  });
});

describe('duplicateStudy', () => {
  it('copies the text, names its origin, and takes neither shares nor comments nor history along', async () => {
    const copy = await duplicateStudy(team.colleague.context, { studyId });
    const study = await Study.findByPk(copy.studyId);
    expect(study).toMatchObject({ originId: studyId, ownerId: team.colleague.userId, revision: 1 });
    const [{ question, content } = {}] = await StudyRevision.findAll({ where: { studyId: copy.studyId } });
    const source = await StudyRevision.findOne({ where: { studyId }, order: [['number', 'DESC']] });
    expect(content).toEqual(source?.content);
    expect(question).toEqual({ ...source?.question, title: `Copy of ${source?.question.title}` });
    const [shares] = await sequelize().query('select 1 from study_shares where study_id = $1', {
      bind: [copy.studyId]
    });
    expect(shares).toHaveLength(0);
  });
});

describe('threads', () => {
  it('are numbered within the study, quote what they hang on, and close only by opener or editor', async () => {
    const { owner, reviewer, colleague } = team;
    const study = await buildStudy(owner.context, { shares: [{ userId: reviewer.userId, role: 'reviewer' }] });
    const anchor = { kind: 'rate', key: 'competition.alpha12' };
    const asked = await openThread(reviewer.context, { ...study, anchor, kind: 'question', body: 'From one series?' });
    const other = await openThread(colleague.context, {
      ...study,
      anchor: { kind: 'study' },
      kind: 'note',
      body: 'Good.'
    });
    expect([asked.number, other.number]).toEqual([1, 2]);
    const close = (context: Context, id: string) =>
      resolveThread(context, { studyId: study.studyId, threadId: id, resolved: true });
    expect((await refused(close(reviewer.context, other.threadId))).status).toBe(403);
    await close(reviewer.context, asked.threadId);
    await close(owner.context, other.threadId);
    const late = replyToThread(owner.context, { studyId: study.studyId, threadId: asked.threadId, body: 'One more.' });
    expect(await refused(late)).toMatchObject({ code: 'thread.closed', status: 409 });
    const foreign = replyToThread(owner.context, { studyId, threadId: asked.threadId, body: 'Elsewhere.' });
    expect((await refused(foreign)).status).toBe(404);
  });
});
