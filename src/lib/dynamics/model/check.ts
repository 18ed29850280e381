import type { ConsumerSpec, GrowthSpec, ConsumerGrowthSpec, ManagedSpec, ModelIssue, ModelSpec } from './spec';

type Complain = (path: string, message: string) => void;

function isNumber(value: unknown): value is number {
  return typeof value === 'number' && Number.isFinite(value);
}

/** Numbers further from 1 than this cannot be multiplied with one another in the numbers of a computer. */
const LARGEST = 1e50;
const BEYOND = 'must lie between 1e-50 and 1e50 in size to be computed with.';

function isBeyond(value: number): boolean {
  const size = Math.abs(value);
  return size !== 0 && (size > LARGEST || size < 1 / LARGEST);
}

function positive(complain: Complain, path: string, value: unknown): void {
  if (value === undefined) complain(path, 'is needed here.');
  else if (!isNumber(value)) complain(path, 'must be a finite number.');
  else if (value <= 0) complain(path, 'must be greater than 0.');
  else if (isBeyond(value)) complain(path, BEYOND);
}

function notNegative(complain: Complain, path: string, value: unknown, optional: boolean): void {
  if (value === undefined) {
    if (!optional) complain(path, 'is needed here.');
  } else if (!isNumber(value)) complain(path, 'must be a finite number.');
  else if (value < 0) complain(path, 'must be 0 or greater.');
  else if (isBeyond(value)) complain(path, BEYOND);
}

function checkGrowth(complain: Complain, path: string, growth: GrowthSpec | ConsumerGrowthSpec): void {
  switch (growth.kind) {
    case 'exponential':
      if (growth.r === undefined) complain(`${path}.r`, 'is needed here.');
      else if (!isNumber(growth.r)) complain(`${path}.r`, 'must be a finite number.');
      else if (isBeyond(growth.r)) complain(`${path}.r`, BEYOND);
      return;
    case 'logistic':
      positive(complain, `${path}.r`, growth.r);
      positive(complain, `${path}.K`, growth.K);
      return;
    case 'allee':
      positive(complain, `${path}.r`, growth.r);
      positive(complain, `${path}.K`, growth.K);
      positive(complain, `${path}.A`, growth.A);
      if (isNumber(growth.K) && isNumber(growth.A) && growth.A > 0 && growth.K > 0 && growth.A >= growth.K) {
        complain(`${path}.A`, 'must be smaller than the carrying capacity K.');
      }
      return;
    case 'leslie':
      positive(complain, `${path}.r`, growth.r);
      positive(complain, `${path}.g`, growth.g);
      return;
    default:
      complain(`${path}.kind`, 'is not a kind of growth this model can have.');
  }
}

function checkManagement(complain: Complain, path: string, species: ManagedSpec): void {
  notNegative(complain, `${path}.removal.effort`, species.removal?.effort, true);
  notNegative(complain, `${path}.removal.quota`, species.removal?.quota, true);
  notNegative(complain, `${path}.stocking`, species.stocking, true);
}

function checkConsumer(complain: Complain, consumer: ConsumerSpec): void {
  const { growth, mortality } = consumer;
  if ((growth === undefined) === (mortality === undefined)) {
    complain('second', 'needs either a mortality or a growth of its own, not both.');
  }
  if (mortality !== undefined) notNegative(complain, 'second.mortality', mortality, false);
  if (growth !== undefined) {
    if (growth.kind === 'logistic' || growth.kind === 'leslie') checkGrowth(complain, 'second.growth', growth);
    else complain('second.growth.kind', 'must be logistic or leslie for a consumer.');
  }
  notNegative(complain, 'second.selfLimitation', consumer.selfLimitation, true);
}

function checkCompetition(complain: Complain, spec: Extract<ModelSpec, { interaction: 'competition' }>): void {
  for (const key of ['first', 'second'] as const) {
    const { growth } = spec[key];
    const kind: string = growth.kind;
    if (kind === 'leslie') complain(`${key}.growth.kind`, 'cannot be leslie here: only a consumer has that ceiling.');
    else checkGrowth(complain, `${key}.growth`, growth);
    if (spec.competition.form === 'coefficients' && kind !== 'logistic') {
      complain(`${key}.growth.kind`, 'must be logistic when competition is given as coefficients; use encounters.');
    }
  }
  switch (spec.competition.form) {
    case 'coefficients':
      notNegative(complain, 'competition.alpha12', spec.competition.alpha12, false);
      notNegative(complain, 'competition.alpha21', spec.competition.alpha21, false);
      return;
    case 'encounters':
      notNegative(complain, 'competition.b12', spec.competition.b12, false);
      notNegative(complain, 'competition.b21', spec.competition.b21, false);
      return;
    default:
      complain('competition.form', 'must be coefficients or encounters.');
  }
}

function checkFeeding(complain: Complain, spec: Extract<ModelSpec, { interaction: 'consumer-resource' }>): void {
  const { feeding } = spec;
  if (!['holling-1', 'holling-2', 'holling-3'].includes(feeding.response)) {
    complain('feeding.response', 'must be holling-1, holling-2 or holling-3.');
  }
  positive(complain, 'feeding.a', feeding.a);
  if (spec.second.growth === undefined) positive(complain, 'feeding.e', feeding.e);
  else notNegative(complain, 'feeding.e', feeding.e, false);
  if (feeding.response === 'holling-1') {
    if (feeding.h !== undefined && feeding.h !== 0) complain('feeding.h', 'has no place in holling-1; leave it out.');
    if (feeding.interference !== undefined && feeding.interference !== 0) {
      complain('feeding.interference', 'has no place in holling-1; use holling-2 or holling-3.');
    }
    return;
  }
  notNegative(complain, 'feeding.h', feeding.h, false);
  notNegative(complain, 'feeding.interference', feeding.interference, true);
}

/**
 * Everything wrong with a model document.
 * @param spec a document of the right shape; its numbers and combinations are what is judged
 * @returns issues in document order, each with the path of the field and a clause that follows its name; empty when sound.
 *   Never throws.
 */
export function checkModel(spec: ModelSpec): ModelIssue[] {
  const issues: ModelIssue[] = [];
  const complain: Complain = (path, message) => issues.push({ path, message });
  const growth: GrowthSpec = spec.first.growth;
  if (spec.interaction === 'competition') {
    checkCompetition(complain, spec);
  } else {
    if ((growth.kind as string) === 'leslie') complain('first.growth.kind', 'cannot be leslie: only a consumer can.');
    else checkGrowth(complain, 'first.growth', growth);
    checkConsumer(complain, spec.second);
    checkFeeding(complain, spec);
  }
  checkManagement(complain, 'first', spec.first);
  checkManagement(complain, 'second', spec.second);
  return issues;
}
