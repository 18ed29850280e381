import type { ModelStructure } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { speciesNames } from './rates';

/** What a result is not, and whom to ask. Shown beside figures and printed with every report. */
export interface Caution {
  key: string;
  title: string;
  text: string;
}

/** The cautions that this structure calls for, the general one first. */
export function cautionsOf(structure: ModelStructure, question: StudyQuestion): Caution[] {
  const names = speciesNames(question);
  const cautions: Caution[] = [
    {
      key: 'advice-not-permit',
      title: 'Advice, not a permit',
      text: 'This is advice for a qualified person. It is not a licence, a quota or a welfare approval. Capture, killing, handling, stocking, release, transport, protected species and pesticide use are regulated: ask the authority. Local law, permits, codes and licensed practice come first.'
    }
  ];
  const removed = (['first', 'second'] as const).filter((key) => structure[key].effort || structure[key].quota);
  const stocked = (['first', 'second'] as const).filter((key) => structure[key].stocking);
  if (removed.length > 0) {
    cautions.push({
      key: 'removal',
      title: 'Removal needs a plan of its own',
      text: `Removing ${removed.map((key) => names[key]).join(' and ')} needs a permit, a humane method, trained people and rules for stopping. The plan names them, and says what happens to by-catch and orphaned young. Arithmetic approves none of this.`
    });
  }
  if (removed.some((key) => structure[key].quota)) {
    cautions.push({
      key: 'fixed-take',
      title: 'A fixed take does not give way',
      text: 'It stays the same while the population falls. A stable point may still exist when the path from today has already left it: read the path, and agree beforehand what stops the take.'
    });
  }
  if (stocked.length > 0) {
    cautions.push({
      key: 'stocking',
      title: 'Stocking can carry harm',
      text: `Stocking ${stocked.map((key) => names[key]).join(' and ')} needs a permit and a check of disease and origin. Released animals can bring illness and foreign genes to those already there.`
    });
  }
  if (structure.interaction === 'consumer-resource') {
    cautions.push({
      key: 'release',
      title: 'Release is decided elsewhere',
      text: `If ${names.second} is to be released against ${names.first}, the plant-protection or environment authority's risk analysis comes first: host range, documentation, monitoring (ISPM 3 gives the frame). Population arithmetic says nothing about host safety.`
    });
  }
  cautions.push({
    key: 'where-not-when',
    title: 'A stable point says where, not when',
    text: 'Compare its return time with the horizon, and look at the path. Outside the levels ever surveyed it is extrapolated.'
  });
  cautions.push({
    key: 'sensitive-places',
    title: 'Sensitive places',
    text: 'Make positions of rare species and nests coarser before you share them.'
  });
  return cautions;
}
