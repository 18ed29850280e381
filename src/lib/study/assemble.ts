import type { ModelStructure, RateEntry, RatePath, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import {
  checkModel,
  type ConsumerGrowthSpec,
  type ConsumerSpec,
  type GrowthSpec,
  type InteractionKind,
  type ManagedSpec,
  type ModelSpec
} from '$lib/dynamics';
import { ratesNeeded, type RateNeed } from './rates';
import { resolveRate, type Issue, type ResolvedRate } from './resolve';

/** From a study's content to the model document of the engine, or to what is missing and wrong. */

export interface Assembled {
  /** Null while anything is missing or wrong. */
  model: ModelSpec | null;
  missing: RateNeed[];
  issues: Issue[];
  /** Every rate that could be read, in the study's units, by path. */
  resolved: Partial<Record<RatePath, ResolvedRate>>;
}

/** The structure a new study opens with: two logistic competitors, or a logistic resource and a consumer that saturates. */
export function defaultStructure(interaction: InteractionKind): ModelStructure {
  const unmanaged = { effort: false, quota: false, stocking: false };
  return {
    interaction,
    first: { growth: 'logistic', ...unmanaged },
    second: {
      growth: interaction === 'competition' ? 'logistic' : 'mortality',
      selfLimitation: false,
      ...unmanaged
    },
    competition: 'coefficients',
    feeding: { response: 'holling-2', interference: false }
  };
}

/** What a new study holds before anything is typed. The run is as long as the question's horizon. */
export function emptyContent(question: StudyQuestion): StudyContent {
  return {
    schema: 1,
    structure: defaultStructure(question.interaction),
    rates: [],
    starts: [],
    run: { span: question.horizon, samples: 201, rtol: 1e-8, atol: 1e-10, thresholds: [] },
    assumptions: []
  };
}

/** The structure that a model document has; zero management terms count as absent. */
export function structureFromModel(model: ModelSpec): ModelStructure {
  const structure = defaultStructure(model.interaction);
  const managed = (species: ManagedSpec) => ({
    effort: (species.removal?.effort ?? 0) > 0,
    quota: (species.removal?.quota ?? 0) > 0,
    stocking: (species.stocking ?? 0) > 0
  });
  structure.first = { growth: model.first.growth.kind, ...managed(model.first) };
  if (model.interaction === 'competition') {
    structure.second = { growth: model.second.growth.kind, selfLimitation: false, ...managed(model.second) };
    structure.competition = model.competition.form;
  } else {
    structure.second = {
      growth: model.second.growth?.kind ?? 'mortality',
      selfLimitation: (model.second.selfLimitation ?? 0) > 0,
      ...managed(model.second)
    };
    structure.feeding = { response: model.feeding.response, interference: (model.feeding.interference ?? 0) > 0 };
  }
  return structure;
}

/** Terms that cannot stand together, before any number is looked at. */
function checkStructure(structure: ModelStructure, question: StudyQuestion): Issue[] {
  const issues: Issue[] = [];
  const add = (path: string, message: string) => issues.push({ path: `structure.${path}`, message });
  const { second } = structure;
  if (structure.interaction !== question.interaction) {
    add('interaction', 'The question asks about another kind of interaction: change the question or the model.');
  }
  if (structure.interaction === 'competition') {
    if (second.growth === 'mortality' || second.growth === 'leslie') {
      add('second.growth', 'A competitor grows by itself: choose exponential, logistic or Allee growth.');
    }
    if (structure.competition === 'coefficients') {
      for (const key of ['first', 'second'] as const) {
        if (structure[key].growth !== 'logistic') {
          add(
            key === 'first' ? 'first.growth' : 'second.growth',
            `Competition coefficients need logistic growth of ${question[key].common}: choose logistic growth, or competition by encounters.`
          );
        }
      }
    }
  } else if (second.growth === 'exponential' || second.growth === 'allee') {
    add(
      'second.growth',
      'A consumer either dies without food, or grows by itself with logistic growth or a ceiling that follows the resource.'
    );
  }
  return issues;
}

class Values {
  constructor(private readonly resolved: Assembled['resolved']) {}
  at(path: RatePath): number {
    // Assembled only after nothing is missing; a hole would be a fault and must not pass as a number.
    return this.resolved[path]?.value ?? Number.NaN;
  }
}

function growthOf(key: 'first' | 'second', kind: ModelStructure['second']['growth'], values: Values): GrowthSpec {
  const r = values.at(`${key}.growth.r`);
  if (kind === 'exponential') return { kind, r };
  const K = values.at(`${key}.growth.K`);
  return kind === 'allee' ? { kind, r, K, A: values.at(`${key}.growth.A`) } : { kind: 'logistic', r, K };
}

function managementOf(key: 'first' | 'second', structure: ModelStructure, values: Values): ManagedSpec {
  const { effort, quota, stocking } = structure[key];
  const managed: ManagedSpec = {};
  if (effort || quota) {
    managed.removal = {
      ...(effort && { effort: values.at(`${key}.removal.effort`) }),
      ...(quota && { quota: values.at(`${key}.removal.quota`) })
    };
  }
  if (stocking) managed.stocking = values.at(`${key}.stocking`);
  return managed;
}

function consumerOf(structure: ModelStructure, values: Values): ConsumerSpec {
  const { growth, selfLimitation } = structure.second;
  const consumer: ConsumerSpec = { ...managementOf('second', structure, values) };
  if (growth === 'mortality') consumer.mortality = values.at('second.mortality');
  else {
    const r = values.at('second.growth.r');
    const own: ConsumerGrowthSpec =
      growth === 'leslie'
        ? { kind: 'leslie', r, g: values.at('second.growth.g') }
        : { kind: 'logistic', r, K: values.at('second.growth.K') };
    consumer.growth = own;
  }
  if (selfLimitation) consumer.selfLimitation = values.at('second.selfLimitation');
  return consumer;
}

function documentOf(structure: ModelStructure, values: Values): ModelSpec {
  const first = {
    growth: growthOf('first', structure.first.growth, values),
    ...managementOf('first', structure, values)
  };
  if (structure.interaction === 'competition') {
    return {
      interaction: 'competition',
      first,
      second: {
        growth: growthOf('second', structure.second.growth, values),
        ...managementOf('second', structure, values)
      },
      competition:
        structure.competition === 'coefficients'
          ? {
              form: 'coefficients',
              alpha12: values.at('competition.alpha12'),
              alpha21: values.at('competition.alpha21')
            }
          : { form: 'encounters', b12: values.at('competition.b12'), b21: values.at('competition.b21') }
    };
  }
  const { response, interference } = structure.feeding;
  const isSaturating = response !== 'holling-1';
  return {
    interaction: 'consumer-resource',
    first,
    second: consumerOf(structure, values),
    feeding: {
      response,
      a: values.at('feeding.a'),
      ...(isSaturating && { h: values.at('feeding.h') }),
      e: values.at('feeding.e'),
      ...(isSaturating && interference && { interference: values.at('feeding.interference') })
    }
  };
}

/** A rate that nobody typed and the model may go without. */
function defaultRate(need: RateNeed): ResolvedRate | null {
  const value = need.defaultValue;
  return value === null
    ? null
    : { path: need.path, value, se: null, low: value, high: value, cv: null, crowding: null };
}

/**
 * The model document of a study. Rates that the structure does not use are left alone: they wait for the structure to come
 * back to them.
 */
export function assemble(question: StudyQuestion, content: StudyContent): Assembled {
  const issues = checkStructure(content.structure, question);
  const missing: RateNeed[] = [];
  const resolved: Assembled['resolved'] = {};
  const entries = new Map<RatePath, RateEntry>();
  for (const entry of content.rates) {
    if (entries.has(entry.path)) {
      issues.push({ path: `rates.${entry.path}`, message: 'This rate is entered twice: keep one of them.' });
    }
    entries.set(entry.path, entry);
  }
  for (const need of ratesNeeded(content.structure, question)) {
    const entry = entries.get(need.path);
    if (!entry) {
      const standIn = defaultRate(need);
      if (standIn) resolved[need.path] = standIn;
      else missing.push(need);
      continue;
    }
    const resolution = resolveRate(entry, question, content);
    if (resolution.ok) resolved[need.path] = resolution.rate;
    // The crowding form of r waits for its K without a complaint of its own: K is already listed as missing.
    else if (!waitsForCapacity(entry, entries)) issues.push(...resolution.issues);
  }
  if (missing.length > 0 || issues.length > 0) return { model: null, missing, issues, resolved };

  const model = documentOf(content.structure, new Values(resolved));
  // The engine's complaints are clauses that follow the name of the field.
  for (const { path, message } of checkModel(model)) {
    const need = ratesNeeded(content.structure, question).find((candidate) => candidate.path === path);
    issues.push(
      need
        ? { path: `rates.${path}.value`, message: `${need.name} (${need.symbol.plain}) ${message}` }
        : { path: `structure.${path}`, message: `This part of the model ${message}` }
    );
  }
  return { model: issues.length === 0 ? model : null, missing, issues, resolved };
}

function waitsForCapacity(entry: RateEntry, entries: ReadonlyMap<RatePath, RateEntry>): boolean {
  if (entry.form !== 'crowding') return false;
  const capacity: RatePath = entry.path === 'first.growth.r' ? 'first.growth.K' : 'second.growth.K';
  return !entries.has(capacity);
}
