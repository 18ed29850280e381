import { QueryTypes } from 'sequelize';
import { StudyListQuery, type StudyQuestion, type StudyRole } from '$lib/contracts/study';
import type { PersonName, StudySketch } from '$lib/contracts/views';
import type { PartStatus } from '$lib/study';
import type { Context } from '../context';
import { sequelize } from '../db/connection';
import { abilitiesOf, can, readableStudies, requireActor, type StudyAct } from '../policies/ability';
import { abilitiesNow } from '../studies/access';

export const PAGE_SIZE = 25;

export interface StudyListRow {
  id: string;
  title: string;
  place: string;
  kind: StudyQuestion['interaction'];
  species: { first: { common: string; scientific: string }; second: { common: string; scientific: string } };
  state: 'open' | 'archived';
  verdict: { kind: string; consequence: string; sentence: string };
  parts: PartStatus[];
  sketch: StudySketch | null;
  owner: PersonName;
  revision: number;
  openThreads: number;
  createdAt: string;
  changedAt: string;
  abilities: StudyAct[];
}

export interface StudyListView {
  query: StudyListQuery;
  rows: StudyListRow[];
  /** Rows that match, on all pages. */
  total: number;
  page: number;
  pages: number;
  pageSize: number;
  /** How many match the words and the other filter, for each choice of a filter. */
  counts: {
    state: { open: number; archived: number; all: number };
    kind: { any: number; competition: number; 'consumer-resource': number };
  };
  /** Every study the reader can see, whatever the filters: 0 shows the empty state. */
  everything: number;
  canCreate: boolean;
}

const ORDER: Record<StudyListQuery['sort'], string> = {
  changed: 'changed_at desc, id',
  created: 'created_at desc, id',
  title: 'lower(title), id',
  place: 'lower(place), lower(title), id'
};

/** A row of the query below; counts arrive as text or number according to the driver's mind. */
interface Found {
  id: string;
  workspaceId: string;
  title: string;
  place: string;
  kind: StudyQuestion['interaction'];
  species: StudyListRow['species'];
  state: 'open' | 'archived';
  verdictKind: string;
  verdictConsequence: string;
  verdictSentence: string;
  partStates: PartStatus[];
  sketch: StudySketch | null;
  ownerId: string;
  ownerName: string;
  revision: number;
  openThreads: number;
  myRole: StudyRole | null;
  createdAt: string;
  changedAt: string;
}
interface Answer {
  counts: { everything: number; total: number; open: number; archived: number; competition: number; consumer: number };
  rows: Found[] | null;
}

/**
 * The studies the actor may read: words, filters, order and counts in one statement, 25 rows a page.
 * The rule of who may read is the policy's `readableStudies`, put as a condition.
 */
export async function studyList(context: Context, query: Partial<StudyListQuery> = {}): Promise<StudyListView> {
  const actor = requireActor(context.actor);
  const asked = StudyListQuery.parse(query);
  const { workspaceIds, ownWorkspaceIds, userId } = readableStudies(actor);
  // A zero character cannot be in any text that is kept, nor be asked of the database.
  const words = [...new Set(asked.q.replaceAll('\0', '').toLowerCase().split(/\s+/).filter(Boolean))].slice(0, 12);
  const [answer] = await sequelize().query<{ answer: Answer }>(statement(asked.sort), {
    type: QueryTypes.SELECT,
    bind: [
      workspaceIds,
      ownWorkspaceIds,
      userId,
      words,
      asked.state,
      asked.kind,
      PAGE_SIZE,
      (asked.page - 1) * PAGE_SIZE
    ]
  });
  const counts = answer?.answer.counts ?? {
    everything: 0,
    total: 0,
    open: 0,
    archived: 0,
    competition: 0,
    consumer: 0
  };
  const rows = (answer?.answer.rows ?? []).map((found): StudyListRow => {
    const subject = {
      kind: 'study' as const,
      workspaceId: found.workspaceId,
      ownerId: found.ownerId,
      shares: found.myRole ? [{ userId, role: found.myRole }] : []
    };
    return {
      id: found.id,
      title: found.title,
      place: found.place,
      kind: found.kind,
      species: found.species,
      state: found.state,
      verdict: { kind: found.verdictKind, consequence: found.verdictConsequence, sentence: found.verdictSentence },
      parts: found.partStates,
      sketch: found.sketch,
      owner: { id: found.ownerId, name: found.ownerName },
      revision: found.revision,
      openThreads: found.openThreads,
      createdAt: new Date(found.createdAt).toISOString(),
      changedAt: new Date(found.changedAt).toISOString(),
      abilities: abilitiesNow(abilitiesOf(actor, subject), found.state)
    };
  });
  return {
    query: asked,
    rows,
    total: counts.total,
    page: asked.page,
    pages: Math.max(1, Math.ceil(counts.total / PAGE_SIZE)),
    pageSize: PAGE_SIZE,
    counts: {
      state: { open: counts.open, archived: counts.archived, all: counts.open + counts.archived },
      kind: {
        any: counts.competition + counts.consumer,
        competition: counts.competition,
        'consumer-resource': counts.consumer
      }
    },
    everything: counts.everything,
    canCreate: actor.memberships.some(({ workspaceId }) =>
      can(actor, 'study.create', { kind: 'workspace', workspaceId })
    )
  };
}

/** $1 workspaces read whole, $2 workspaces read where owned, $3 the actor, $4 words, $5 state, $6 kind, $7 limit, $8 offset. */
function statement(sort: StudyListQuery['sort']): string {
  return `
  with readable as materialized (
    select s.id, s.state, s.kind, s.title, s.place, s.changed_at, s.created_at,
           not exists (select 1 from unnest($4::text[]) word where strpos(s.search_text, word) = 0) as matches
    from studies s
    where s.deleted_at is null and (
      s.workspace_id = any ($1::uuid[])
      or (s.owner_id = $3::uuid and s.workspace_id = any ($2::uuid[]))
      or exists (select 1 from study_shares h where h.study_id = s.id and h.user_id = $3::uuid)
    )
  ),
  counted as (
    select
      count(*)::int as everything,
      count(*) filter (where matches and ($5 = 'all' or state = $5) and ($6 = 'any' or kind = $6))::int as total,
      count(*) filter (where matches and ($6 = 'any' or kind = $6) and state = 'open')::int as open,
      count(*) filter (where matches and ($6 = 'any' or kind = $6) and state = 'archived')::int as archived,
      count(*) filter (where matches and ($5 = 'all' or state = $5) and kind = 'competition')::int as competition,
      count(*) filter (where matches and ($5 = 'all' or state = $5) and kind = 'consumer-resource')::int as consumer
    from readable
  ),
  shown as (
    select id, row_number() over (order by ${ORDER[sort]}) as place_in_list
    from readable
    where matches and ($5 = 'all' or state = $5) and ($6 = 'any' or kind = $6)
    order by ${ORDER[sort]}
    limit $7::int offset $8::int
  ),
  full_rows as (
    select shown.place_in_list, json_build_object(
      'id', s.id, 'workspaceId', s.workspace_id, 'title', s.title, 'place', s.place, 'kind', s.kind, 'species', s.species,
      'state', s.state, 'verdictKind', s.verdict_kind, 'verdictConsequence', s.verdict_consequence,
      'verdictSentence', s.verdict_sentence, 'partStates', s.part_states, 'sketch', s.sketch, 'ownerId', s.owner_id,
      'ownerName', u.name, 'revision', s.revision, 'createdAt', s.created_at, 'changedAt', s.changed_at,
      'myRole', (select h.role from study_shares h where h.study_id = s.id and h.user_id = $3::uuid),
      'openThreads', (select count(*)::int from threads t where t.study_id = s.id and t.state = 'open')
    ) as found
    from shown join studies s on s.id = shown.id join users u on u.id = s.owner_id
  )
  select json_build_object(
    'counts', (select row_to_json(counted) from counted),
    'rows', (select json_agg(found order by place_in_list) from full_rows)
  ) as answer`;
}
