import type { RateEntry, RatePath, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { defaultStructure, emptyContent } from './assemble';

/** Three invented studies with worked numbers, for the unit tests of this folder only. */

export const crayfish: StudyQuestion = {
  title: 'Crayfish of North Arm',
  place: 'North Arm',
  area: { value: 12.5, unit: 'har' },
  interaction: 'competition',
  first: { common: 'stream crayfish', scientific: 'Astacidae', counted: 'adults', unit: '{ind}/har' },
  second: { common: 'saddleback crayfish', scientific: 'Cambaridae', counted: 'adults', unit: '{ind}/har' },
  protects: 'first',
  timeUnit: 'a',
  horizon: 20,
  objective: 'How hard to trap.',
  acceptableRisk: 10
};

export const fern: StudyQuestion = {
  title: 'Raft-fern of Third Cut',
  place: 'Third Cut',
  area: { value: 9000, unit: 'm2' },
  interaction: 'consumer-resource',
  first: { common: 'raft-fern', scientific: 'Salviniaceae', counted: 'wet mass', unit: 'kg/m2' },
  second: { common: 'raft-fern weevil', scientific: 'Curculionidae', counted: 'adults', unit: '{ind}/m2' },
  protects: 'neither',
  timeUnit: 'd',
  horizon: 730,
  objective: 'Whether the weevil keeps the fern down.',
  acceptableRisk: 20
};

export const goats: StudyQuestion = {
  title: 'Goats and broom',
  place: 'South Ridge',
  area: { value: 640, unit: 'har' },
  interaction: 'consumer-resource',
  first: { common: 'ridge broom', scientific: 'Fabaceae', counted: 'dry mass', unit: 'kg/har' },
  second: { common: 'ridge goats', scientific: 'Bovidae', counted: 'animals', unit: '{ind}/har' },
  protects: 'first',
  timeUnit: 'a',
  horizon: 6,
  objective: 'Broom at 2 800 kg/ha in six years.',
  acceptableRisk: 10
};

export function rate(
  path: RatePath,
  value: number,
  unit: string,
  uncertainty: RateEntry['uncertainty'] = { kind: 'cv', percent: 10 },
  form: RateEntry['form'] = 'plain'
): RateEntry {
  return {
    path,
    value,
    unit,
    form,
    uncertainty,
    source: { kind: 'own survey', text: 'Summer surveys' },
    note: '',
    overrideReason: ''
  };
}

export function crayfishContent(): StudyContent {
  return {
    ...emptyContent(crayfish),
    rates: [
      rate('first.growth.r', 0.55, '/a'),
      rate('first.growth.K', 900, '{ind}/har'),
      rate('second.growth.r', 0.95, '/a'),
      rate('second.growth.K', 1100, '{ind}/har'),
      rate('competition.alpha12', 1.35, '1'),
      rate('competition.alpha21', 0.6, '1')
    ],
    starts: [{ label: 'Today', x: 780, y: 12, source: 'Survey of 10 June' }]
  };
}

export function fernContent(): StudyContent {
  return {
    ...emptyContent(fern),
    rates: [
      rate('first.growth.r', 0.07, '/d'),
      rate('first.growth.K', 10, 'kg/m2'),
      rate('second.mortality', 0.025, '/d'),
      rate('feeding.a', 1 / 750, 'm2/{ind}/d'),
      rate('feeding.h', 250, 'd.{ind}/kg'),
      rate('feeding.e', 15, '{ind}/kg')
    ],
    starts: [{ label: 'Today', x: 5.5, y: 30, source: 'Survey of 4 April' }]
  };
}

export function goatContent(removal?: { effort?: number; quota?: number }): StudyContent {
  const structure = defaultStructure('consumer-resource');
  structure.second.effort = removal?.effort !== undefined;
  structure.second.quota = removal?.quota !== undefined;
  const rates = [
    rate('first.growth.r', 0.35, '/a'),
    rate('first.growth.K', 4200, 'kg/har'),
    rate('second.mortality', 0.32, '/a'),
    rate('feeding.a', 0.2778, 'har/{ind}/a'),
    rate('feeding.h', 0.002, 'a.{ind}/kg'),
    rate('feeding.e', 0.0014, '{ind}/kg')
  ];
  if (removal?.effort !== undefined) {
    rates.push(rate('second.removal.effort', removal.effort, '/a', { kind: 'exact' }));
  }
  if (removal?.quota !== undefined) {
    rates.push(rate('second.removal.quota', removal.quota, '{ind}/a', { kind: 'exact' }));
  }
  return {
    ...emptyContent(goats),
    structure,
    rates,
    starts: [{ label: 'Today', x: 2300, y: 1.05, source: 'Spring count' }]
  };
}
