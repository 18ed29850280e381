import { beforeAll, describe, expect, it } from 'vitest';
import { systemContext } from '../context';
import { AuditEvent } from '../db/models/AuditEvent';
import { Study } from '../db/models/Study';
import { StudyRevision } from '../db/models/StudyRevision';
import { studyList } from '../queries/studyList';
import { studyOverview } from '../queries/studyOverview';
import { studyThreads } from '../queries/studyThreads';
import { seed } from './seed';
import { seedPeople, type DemoPeople } from './seedPeople';

let people: DemoPeople;
beforeAll(async () => {
  await seed();
  people = await seedPeople();
});

const study = async (title: RegExp) => {
  const found = (await Study.findAll()).find((row) => title.test(row.title));
  if (!found) throw new Error(`the demo has no study like ${title}`);
  return found;
};

describe('the demo', () => {
  it('holds three complete studies with the outcomes that their fits give', async () => {
    const { rows } = await studyList(systemContext(people.actors.ecologist));
    const told = Object.fromEntries(rows.map(({ title, verdict, parts }) => [title, { verdict, parts }]));
    expect(Object.keys(told)).toHaveLength(3);
    expect(told['Crayfish of the North Arm']?.verdict).toMatchObject({ kind: 'exclusion', consequence: 'lost' });
    expect(told['Raft-fern and weevil in the Third Cut']?.verdict).toMatchObject({ kind: 'cycles' });
    expect(told['Goats and broom on South Ridge']?.verdict).toMatchObject({ kind: 'coexistence' });
    for (const { parts } of Object.values(told)) {
      expect(parts.filter(({ state }) => state === 'ready').map(({ key }) => key)).toEqual(
        expect.arrayContaining(['rates', 'model', 'equilibria', 'trajectories'])
      );
    }
  });

  it('is made once: a second run adds nothing, and neither does one after a study was deleted', async () => {
    const count = async () => [await Study.count(), await StudyRevision.count(), await AuditEvent.count()];
    const before = await count();
    await seed();
    expect(await count()).toEqual(before);
  });

  it('keeps the hundredfold slip of the area in its third revision, and has it put right since', async () => {
    const goats = await study(/Goats/);
    const revisions = await StudyRevision.findAll({ where: { studyId: goats.id }, order: ['number'] });
    const area = (number: number) => revisions[number - 1]?.question.area;
    expect([area(2), area(3)]).toEqual([
      { value: 640, unit: 'har' },
      { value: 640, unit: 'km2' }
    ]);
    expect(area(goats.revision)).toEqual({ value: 640, unit: 'har' });
    expect(revisions.some(({ summary }) => /Area 640 km², now 640 ha/.test(summary))).toBe(true);
  });

  it('gives the reviewer one study to read and comment on, and lets the observer read all', async () => {
    const crayfish = await study(/Crayfish/);
    const reviewer = systemContext(people.actors.reviewer);
    expect((await studyList(reviewer)).rows.map(({ id }) => id)).toEqual([crayfish.id]);
    expect((await studyOverview(reviewer, crayfish.id)).abilities).toEqual(
      expect.arrayContaining(['study.read', 'study.comment'])
    );
    expect((await studyOverview(reviewer, crayfish.id)).abilities).not.toContain('study.edit');
    expect((await studyList(systemContext(people.actors.observer))).rows).toHaveLength(3);
    const [thread] = await studyThreads(reviewer, crayfish.id);
    expect(thread).toMatchObject({ state: 'open', kind: 'question', anchor: { key: 'competition.alpha12' } });
  });

  it('names a source, a unit and an error for every rate', async () => {
    for (const row of await Study.findAll()) {
      const revision = await StudyRevision.findOne({ where: { studyId: row.id, number: row.revision } });
      for (const rate of revision?.content.rates ?? []) {
        expect(rate.source.text.length).toBeGreaterThan(20);
        expect(rate.uncertainty.kind).not.toBe('exact');
      }
    }
  });
});
