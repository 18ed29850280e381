import { randomUUID } from 'node:crypto';
import { beforeAll, describe, expect, it } from 'vitest';
import { buildSomeone, buildTeam, buildWorkspace, type Team } from '../../../../tests/harness/factories/actors';
import {
  buildStudy,
  competitionQuestion,
  consumerQuestion,
  today,
  typedRate
} from '../../../../tests/harness/factories/studies';
import { archiveStudy } from '../commands/archiveStudy';
import { deleteStudy } from '../commands/deleteStudy';
import { openThread } from '../commands/openThread';
import { recordReading } from '../commands/recordReading';
import { saveRate } from '../commands/saveRate';
import { shareStudy } from '../commands/shareStudy';
import { duplicateStudy } from '../commands/duplicateStudy';
import { systemContext } from '../context';
import { Study } from '../db/models/Study';
import { startMailbox } from '../mail/mailbox';
import { PAGE_SIZE, studyList } from './studyList';
import { studyEquilibria } from './studyEquilibria';
import { studyHistory, studyRevision } from './studyHistory';
import { studyModel } from './studyModel';
import { studyOverview } from './studyOverview';
import { studyRates } from './studyRates';
import { studySharing } from './studySharing';
import { studyThreads } from './studyThreads';
import { studyTrajectories } from './studyTrajectories';

let team: Team;
let studyId: string;
let revision: number;

const consumerRates = [
  typedRate('first.growth.r', 1.4, '/a'),
  typedRate('first.growth.K', 900, 'kg/har'),
  typedRate('second.mortality', 0.35, '/a'),
  typedRate('feeding.a', 0.02, 'har/{ind}/a'),
  typedRate('feeding.h', 0.6, 'a.{ind}/kg'),
  typedRate('feeding.e', 0.12 * 20, '{ind}/kg')
];

beforeAll(async () => {
  await startMailbox();
  team = await buildTeam();
  ({ studyId, revision } = await buildStudy(team.owner.context, {
    shares: [{ userId: team.reviewer.userId, role: 'reviewer' }]
  }));
});

describe('every query of a study', () => {
  const queries = {
    studyOverview,
    studyRates,
    studyModel,
    studyEquilibria,
    studyTrajectories,
    studyThreads,
    studyHistory
  };
  it.each(Object.entries(queries))(
    '%s: 401 for nobody, 404 for an outsider, an answer for a reader',
    async (_n, query) => {
      await expect(query(systemContext(null), studyId)).rejects.toMatchObject({ status: 401 });
      await expect(query(team.outsider.context, studyId)).rejects.toMatchObject({ status: 404 });
      await expect(query(team.nobody.context, studyId)).rejects.toMatchObject({ status: 404 });
      for (const reader of [team.reviewer, team.observer, team.colleague]) {
        expect(await query(reader.context, studyId)).toBeDefined();
      }
    }
  );
});

describe('studyOverview', () => {
  it('says what was found, how far each part has come and what the reader may do', async () => {
    const view = await studyOverview(team.reviewer.context, studyId);
    expect(view).toMatchObject({ id: studyId, revision, shares: 1, verdict: { kind: 'coexistence' }, missing: [] });
    expect(view.parts.map(({ key }) => key)).toHaveLength(9);
    expect(view.abilities).toEqual(['study.read', 'study.comment', 'study.export']);
  });

  it('makes a part stale when the numbers it was read from change, and not when a source is named better', async () => {
    const { owner } = team;
    const own = await buildStudy(owner.context);
    await recordReading(owner.context, { ...own, part: 'equilibria', sentence: 'Both stay.' });
    const state = async () => {
      const { parts, readings } = await studyOverview(owner.context, own.studyId);
      const part = parts.find(({ key }) => key === 'equilibria');
      return [part?.state, readings.equilibria?.isStale, part?.summary];
    };
    expect(await state()).toEqual(['ready', false, 'Both persist']);
    const source = { kind: 'own survey' as const, text: 'Pond counts 2019 to 2024' };
    const named = await saveRate(owner.context, { ...own, rate: typedRate('first.growth.r', 0.9, '/a', { source }) });
    expect(await state()).toEqual(['ready', false, 'Both persist']);
    await saveRate(owner.context, {
      studyId: own.studyId,
      revision: named.revision,
      rate: typedRate('first.growth.r', 0.8, '/a', { source })
    });
    expect(await state()).toEqual(['stale', true, expect.stringMatching(/r₁.*changed since version/)]);
    const row = await Study.findByPk(own.studyId);
    expect(row?.partStates.find(({ key }) => key === 'equilibria')?.state).toBe('stale');
  });

  it('names the origin of a copy to those who may read it', async () => {
    const copy = await duplicateStudy(team.colleague.context, { studyId });
    expect((await studyOverview(team.colleague.context, copy.studyId)).origin?.id).toBe(studyId);
  });
});

describe('studyRates and studyModel', () => {
  it('give each rate its unit list, echo and standing, and the model its document', async () => {
    const rates = await studyRates(team.owner.context, studyId);
    expect(rates.rows.map(({ need }) => need.path)).toHaveLength(6);
    const [growth] = rates.rows;
    expect(growth).toMatchObject({ studyUnit: '/a', resolved: { value: 0.9 }, issues: [] });
    expect(growth?.echo.join(' ')).toMatch(/doubles in/);
    const model = await studyModel(team.owner.context, studyId);
    expect(model.model).toMatchObject({ interaction: 'competition', competition: { alpha12: 0.7, alpha21: 0.5 } });
    expect(model.assumptions.length).toBeGreaterThan(3);
  });
});

describe('studyEquilibria', () => {
  it('gives points with errors, paragraphs and invasions with intervals, and the plane to draw', async () => {
    const { findings } = await studyEquilibria(team.owner.context, studyId);
    const both = findings?.points.find(({ who }) => who === 'both');
    // K1 - alpha12 K2 over 1 - alpha12 alpha21.
    expect(both?.x).toBeCloseTo((420 - 0.7 * 310) / (1 - 0.35), 9);
    expect(both?.y).toBeCloseTo((310 - 0.5 * 420) / (1 - 0.35), 9);
    // By hand: dx/dK1 = 1/D, dx/dK2 = -a12/D, dx/da12 = (a21 x - K2)/D, dx/da21 = a12 x/D, each error a tenth.
    const D = 0.65;
    const x = both?.x ?? 0;
    const byHand = Math.hypot(42 / D, (0.7 * 31) / D, (0.07 * (0.5 * x - 310)) / D, (0.05 * 0.7 * x) / D);
    expect(both?.seX).toBeCloseTo(byHand, 6);
    expect(both?.paragraph.sentences.length).toBeGreaterThan(1);
    for (const invasion of findings?.invasions ?? []) {
      expect(invasion.low).toBeLessThan(invasion.rate);
      expect(invasion.high).toBeGreaterThan(invasion.rate);
    }
    const { plane, paths } = findings ?? { plane: null, paths: [] };
    expect(plane?.isoclines.filter(({ trivial }) => !trivial).length).toBeGreaterThanOrEqual(2);
    expect(plane?.separatrices).toHaveLength(0);
    expect(paths).toHaveLength(1);
    expect(paths[0]?.points[0]).toEqual({ x: today.x, y: today.y });
    expect(paths[0]?.points.every((point) => point.x <= (plane?.window.xMax ?? 0))).toBe(true);
  });

  it('finds the cycle of a consumer and resource, and says so in the verdict', async () => {
    const own = await buildStudy(team.owner.context, {
      question: consumerQuestion,
      rates: consumerRates.map((rate) => (rate.path === 'feeding.e' ? { ...rate, value: 0.36 } : rate)),
      starts: [{ ...today, x: 300, y: 20 }]
    });
    const { findings, verdict } = await studyEquilibria(team.owner.context, own.studyId);
    const unstable = findings?.points.find(({ who }) => who === 'both')?.stability === 'unstable';
    expect(findings?.cycles.filter(({ stability }) => stability === 'stable')).toHaveLength(unstable ? 1 : 0);
    expect(verdict.kind).toBe(unstable ? 'cycles' : 'coexistence');
  });

  it('says what is missing instead of guessing', async () => {
    const own = await buildStudy(team.owner.context, { rates: [typedRate('first.growth.r', 0.9, '/a')], starts: [] });
    const view = await studyEquilibria(team.owner.context, own.studyId);
    expect(view).toMatchObject({ model: null, findings: null, verdict: { kind: 'none' } });
    expect(view.missing).toHaveLength(5);
  });
});

describe('studyTrajectories', () => {
  it('follows every start and checks each path by another method', async () => {
    const own = await buildStudy(team.owner.context, { starts: [today, { ...today, label: 'Few', x: 2, y: 2 }] });
    const { runs } = await studyTrajectories(team.owner.context, own.studyId);
    expect(runs.map(({ start }) => start.label)).toEqual(['Today', 'Few']);
    for (const { result, crossCheck } of runs) {
      expect([result.outcome.status, result.t.length]).toEqual(['reached', 201]);
      expect(crossCheck.largestRelativeDifference).toBeLessThan(1e-7);
    }
  });
});

describe('studyThreads', () => {
  it('tells what a comment hung on, whether that has changed, and who may close it', async () => {
    const { owner, reviewer } = team;
    const own = await buildStudy(owner.context, { shares: [{ userId: reviewer.userId, role: 'reviewer' }] });
    const anchors = [{ kind: 'rate', key: 'first.growth.K' }, { kind: 'point', key: 'D' }, { kind: 'study' }];
    for (const anchor of anchors) {
      await openThread(reviewer.context, { ...own, anchor, kind: 'must fix', body: 'Check this.' });
    }
    await expect(
      openThread(reviewer.context, { ...own, anchor: { kind: 'point', key: 'Q' }, kind: 'note', body: 'x' })
    ).rejects.toMatchObject({ status: 422, issues: [{ path: 'anchor.key' }] });
    const before = await studyThreads(owner.context, own.studyId);
    expect(before.map(({ anchor }) => anchor.hasChanged)).toEqual([false, false, false]);
    expect(before[0]?.anchor.quote).toMatch(/420 ind\/ha, CV 10/);
    expect(before[1]?.anchor.quote).toMatch(/^Both together: .*stable node$/);
    await saveRate(owner.context, { ...own, rate: typedRate('first.growth.K', 400, '{ind}/har') });
    const after = await studyThreads(reviewer.context, own.studyId);
    expect(after.map(({ anchor }) => anchor.hasChanged)).toEqual([true, true, false]);
    expect(after[0]).toMatchObject({ canReply: true, canResolve: true, kind: 'must fix' });
    expect((await studyThreads(team.observer.context, own.studyId))[0]).toMatchObject({
      canReply: false,
      canResolve: false
    });
    expect((await studyOverview(owner.context, own.studyId)).threads).toEqual({ open: 3, mustFix: 3 });
  });
});

describe('studyHistory', () => {
  it('lists revisions with what changed, and gives each whole with its differences', async () => {
    const { owner } = team;
    const own = await buildStudy(owner.context);
    await saveRate(owner.context, { ...own, rate: typedRate('competition.alpha12', 0.9, '1') });
    const { revisions } = await studyHistory(owner.context, own.studyId);
    expect(revisions.map(({ number }) => number)).toEqual([9, 8, 7, 6, 5, 4, 3, 2, 1]);
    expect(revisions[0]).toMatchObject({ isCurrent: true, author: { name: 'Test ecologist' } });
    expect(revisions[0]?.summary).toMatch(/α₁₂.*0\.7.*now 0\.9/);
    const third = await studyRevision(owner.context, own.studyId, 3);
    expect(third.changed).toMatchObject([{ path: 'rates.first.growth.K', before: null }]);
    expect(third.since.map(({ path }) => path)).toContain('rates.competition.alpha12');
    await expect(studyRevision(owner.context, own.studyId, 10)).rejects.toMatchObject({ status: 404 });
    await expect(studyRevision(owner.context, own.studyId, Number.NaN)).rejects.toMatchObject({ status: 404 });
  });
});

describe('studySharing', () => {
  it('names people with a share and invitations that are open, to those who may share', async () => {
    const { owner, colleague, nobody, reviewer } = team;
    const own = await buildStudy(owner.context);
    expect(await shareStudy(owner.context, { ...own, email: nobody.email, role: 'contributor' })).toMatchObject({
      outcome: 'shared'
    });
    expect(await shareStudy(owner.context, { ...own, email: 'New@Elsewhere.example ', role: 'reviewer' })).toEqual({
      outcome: 'invited',
      email: 'new@elsewhere.example'
    });
    const view = await studySharing(owner.context, own.studyId);
    expect(view.shares).toMatchObject([{ email: nobody.email, role: 'contributor' }]);
    expect(view.invitations).toMatchObject([{ email: 'new@elsewhere.example', role: 'reviewer' }]);
    await expect(studySharing(colleague.context, own.studyId)).rejects.toMatchObject({ status: 403 });
    await expect(studySharing(reviewer.context, own.studyId)).rejects.toMatchObject({ status: 404 });
    await expect(shareStudy(owner.context, { ...own, email: owner.email, role: 'observer' })).rejects.toMatchObject({
      code: 'share.owner'
    });
    await expect(shareStudy(owner.context, { ...own, email: nobody.email, role: 'observer' })).rejects.toMatchObject({
      status: 422,
      issues: [{ path: 'email' }]
    });
  });
});

describe('studyList', () => {
  it('finds by words, filters, orders, counts, and leaves out what is deleted', async () => {
    const workspaceId = await buildWorkspace('List agency');
    const someone = await buildSomeone({ workspaceId, role: 'ecologist' });
    const { context } = someone;
    const make = (title: string, place: string, question = competitionQuestion) =>
      buildStudy(context, { question: { ...question, title, place }, rates: [], starts: [] });
    const [ash, birch, cedar] = [
      await make('Ash pond', 'North'),
      await make('Birch lake', 'South'),
      await make('Cedar bank', 'North', consumerQuestion)
    ];
    const titles = async (query: Parameters<typeof studyList>[1]) =>
      (await studyList(context, query)).rows.map(({ title }) => title);
    expect(await titles({})).toEqual(['Cedar bank', 'Birch lake', 'Ash pond']);
    expect(await titles({ sort: 'title' })).toEqual(['Ash pond', 'Birch lake', 'Cedar bank']);
    expect(await titles({ q: 'NORTH hare' })).toEqual(['Cedar bank']);
    expect(await titles({ q: 'salamandridae' })).toEqual(['Birch lake', 'Ash pond']);
    expect(await titles({ q: "o'); drop table studies; --" })).toEqual([]);
    expect(await titles({ q: '100%' })).toEqual([]);
    expect(await titles({ q: 'birch\u0000' })).toEqual(['Birch lake']);
    expect(await titles({ kind: 'consumer-resource' })).toEqual(['Cedar bank']);
    await archiveStudy(context, ash);
    expect(await titles({})).toEqual(['Cedar bank', 'Birch lake']);
    expect(await titles({ state: 'archived' })).toEqual(['Ash pond']);
    const all = await studyList(context, { state: 'all' });
    expect(all.counts).toEqual({
      state: { open: 2, archived: 1, all: 3 },
      kind: { any: 3, competition: 2, 'consumer-resource': 1 }
    });
    expect(all.rows.find(({ id }) => id === ash.studyId)?.abilities).not.toContain('study.edit');
    expect(all.rows.find(({ id }) => id === birch.studyId)?.abilities).toContain('study.edit');
    await deleteStudy(context, cedar);
    expect(await titles({ state: 'all' })).toEqual(['Ash pond', 'Birch lake']);
    expect((await studyList(team.outsider.context)).rows.map(({ id }) => id)).not.toContain(birch.studyId);
  });

  it('stays fast with 2 000 studies', async () => {
    const workspaceId = await buildWorkspace('Large agency');
    const someone = await buildSomeone({ workspaceId, role: 'ecologist' });
    const { studyId: model } = await buildStudy(someone.context);
    const template = (await Study.findByPk(model))?.get();
    if (!template) throw new Error('the study that was just made is gone');
    const words = ['fen', 'heron', 'sedge', 'lode', 'osier', 'mink', 'vole', 'perch', 'frog', 'reed'];
    const rows = Array.from({ length: 2000 }, (_, i) => {
      const title = `${words[i % 10]} and ${words[(i * 7 + 3) % 10]} ${i}`;
      return {
        ...template,
        id: randomUUID(),
        title,
        searchText: `${title} ${template.searchText}`,
        state: i % 5 === 0 ? ('archived' as const) : ('open' as const),
        changedAt: new Date(Date.UTC(2024, 0, 1) + i * 3_600_000)
      };
    });
    await Study.bulkCreate(rows);
    const timings: string[] = [];
    for (const [name, query] of Object.entries({
      first: {},
      'page 60': { page: 60 },
      search: { q: 'heron sedge' },
      'search and filter': { q: 'mink', state: 'archived' as const, sort: 'title' as const }
    })) {
      const started = performance.now();
      const view = await studyList(someone.context, query);
      timings.push(`${name} ${Math.round(performance.now() - started)} ms`);
      expect(view.everything).toBe(2001);
      expect(view.rows.length).toBeLessThanOrEqual(PAGE_SIZE);
      if (name === 'first') expect([view.total, view.pages]).toEqual([1601, 65]);
    }
    console.log(`studyList with 2 000 studies: ${timings.join(', ')}`);
  });
});
