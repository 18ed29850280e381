import type { ModelStructure } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { speciesNames } from './rates';

/** What each model takes for granted and what it leaves out. The author ticks or comments each; all of them go into the report. */

export interface AssumptionText {
  /** Stable; stored with the tick. */
  key: string;
  kind: 'assumes' | 'leaves out';
  text: string;
}

const assumes = (key: string, text: string): AssumptionText => ({ key, kind: 'assumes', text });
const leavesOut = (key: string, text: string): AssumptionText => ({ key, kind: 'leaves out', text });

function growthAssumptions(key: 'first' | 'second', structure: ModelStructure, name: string): AssumptionText[] {
  switch (structure[key].growth) {
    case 'exponential':
      return [
        assumes(
          `${key}-unlimited`,
          `Nothing but the other species limits ${name}: alone, the population grows without end.`
        )
      ];
    case 'logistic':
      return [
        assumes(
          `${key}-logistic`,
          `Growth per head of ${name} falls in a straight line with its own abundance, and stops at K.`
        )
      ];
    case 'allee':
      return [
        assumes(
          `${key}-allee`,
          `Below A, a population of ${name} shrinks even when alone; A is the same everywhere and always.`
        )
      ];
    case 'leslie':
      return [
        assumes(
          'second-ceiling-follows',
          `The ceiling of ${name} follows the resource at once, and is undefined where the resource is gone.`
        )
      ];
    case 'mortality':
      return [
        assumes('second-one-food', `The only food of ${name} is this resource; without it they die at a constant rate.`)
      ];
  }
}

function competitionAssumptions(structure: ModelStructure, names: { first: string; second: string }): AssumptionText[] {
  const list = [
    assumes(
      'harm-in-proportion',
      `Harm grows in proportion to the abundance of the other species: the tenth ${names.second} does as much as the first.`
    )
  ];
  if (structure.competition === 'encounters') {
    list.push(
      assumes(
        'harm-by-meeting',
        `${names.first} and ${names.second} harm each other as often as they would meet by chance.`
      )
    );
  } else {
    list.push(
      assumes(
        'shared-limit',
        'The two species use the same limiting thing, in the fixed exchange that the harm rates give.'
      )
    );
  }
  if (structure.first.growth === 'exponential' && structure.second.growth === 'exponential') {
    list.push(
      assumes(
        'no-stable-mixture',
        'Two competitors that both grow exponentially have no stable mixture at all: one of them always grows without limit.'
      )
    );
  }
  return list;
}

function feedingAssumptions(structure: ModelStructure, names: { first: string; second: string }): AssumptionText[] {
  const { response, interference } = structure.feeding;
  const list: AssumptionText[] = [];
  if (response === 'holling-1') {
    list.push(
      assumes(
        'never-full',
        `The appetite of ${names.second} has no end: where there is twice as much ${names.first}, twice as much is eaten.`
      )
    );
    if (structure.first.growth === 'exponential' && !structure.second.selfLimitation) {
      list.push(
        assumes(
          'loops-remember-start',
          'An unlimited resource with linear feeding gives closed loops whose size is only the memory of the start: undecided, fragile. The smallest self-limitation turns them into damping.'
        )
      );
    }
  } else if (response === 'holling-2') {
    list.push(
      assumes(
        'fills-up',
        `Handling ${names.first} takes time, one piece after another, at the same speed at every age and season.`
      )
    );
  } else {
    list.push(
      assumes(
        'eats-little-when-scarce',
        `Feeding on ${names.first} almost stops where it is scarce, and picks up as it grows common.`
      )
    );
  }
  list.push(
    assumes('eaten-becomes-young', `Food eaten becomes new ${names.second} at once and at a constant exchange.`)
  );
  if (interference && response !== 'holling-1') {
    list.push(
      assumes('in-each-others-way', `Feeding slows with the number of ${names.second}, not with where they are.`)
    );
  }
  if (structure.second.selfLimitation) {
    list.push(
      assumes('crowding-among-consumers', `Extra loss of ${names.second} grows in proportion to its own abundance.`)
    );
  }
  if (structure.second.growth === 'logistic') {
    list.push(
      assumes(
        'other-food-constant',
        `Other food of ${names.second} is always there and does not depend on ${names.first}.`
      )
    );
  }
  return list;
}

function managementAssumptions(structure: ModelStructure, names: { first: string; second: string }): AssumptionText[] {
  return (['first', 'second'] as const).flatMap((key) => {
    const list: AssumptionText[] = [];
    if (structure[key].effort) {
      list.push(
        assumes(
          `${key}-even-removal`,
          `Removal of ${names[key]} goes on all year, at the same share of those present, without learning or refuge.`
        )
      );
    }
    if (structure[key].quota) {
      list.push(
        assumes(
          `${key}-fixed-take`,
          `The take of ${names[key]} is met in full whatever is left, so that it can run out while a resting point still exists.`
        )
      );
    }
    if (structure[key].stocking) {
      list.push(assumes(`${key}-stocked-alike`, `Stocked ${names[key]} live, breed and die as those already there.`));
    }
    return list;
  });
}

/** The list for one structure, what it assumes first. */
export function assumptionsOf(structure: ModelStructure, question: StudyQuestion): AssumptionText[] {
  const names = speciesNames(question);
  return [
    ...growthAssumptions('first', structure, names.first),
    ...growthAssumptions('second', structure, names.second),
    ...(structure.interaction === 'competition'
      ? competitionAssumptions(structure, names)
      : feedingAssumptions(structure, names)),
    ...managementAssumptions(structure, names),
    assumes('well-mixed', `${question.place} is one well-mixed place: every individual meets the same conditions.`),
    assumes(
      'constant-rates',
      'Rates stay as they are for the whole horizon, and continuous rates smooth over seasons.'
    ),
    leavesOut('third-species', 'Any third species: other food, other enemies, other competitors.'),
    leavesOut('age-and-size', 'Age, size and sex: every individual is an average one.'),
    leavesOut('movement', 'Movement in and out of the place.'),
    leavesOut('weather', 'Weather, seasons and good or bad years.'),
    leavesOut('disease-evolution', 'Disease and evolution.'),
    leavesOut(
      'chance',
      'Chance: small populations die out by it, and these equations do not know. Fewer than one animal on the area is not survival.'
    )
  ];
}
