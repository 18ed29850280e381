import { abundanceUnits, areaUnits, timeUnits } from '$lib/contracts/study';
import { displayUnit } from '$lib/study';

/** What people choose from, in the order in which it is most often chosen. */
export const timeUnitChoices = [
  { value: 'a', label: 'year' },
  { value: 'mo', label: 'month' },
  { value: 'wk', label: 'week' },
  { value: 'd', label: 'day' }
] satisfies { value: (typeof timeUnits)[number]; label: string }[];

export const areaUnitChoices = areaUnits.map((value) => ({ value, label: displayUnit(value).text }));

export const abundanceUnitChoices = abundanceUnits.map((value) => ({ value, label: displayUnit(value).text }));

export const interactionChoices = [
  {
    value: 'competition',
    label: 'They compete',
    detail: 'Both want the same food, space or light; each is worse off where the other is common.'
  },
  {
    value: 'consumer-resource',
    label: 'One eats the other',
    detail: 'The first species is the resource, the second the consumer: grazer, predator or control agent.'
  }
] as const;

export const protectsChoices = [
  { value: 'both', label: 'Both species' },
  { value: 'first', label: 'The first species' },
  { value: 'second', label: 'The second species' },
  { value: 'neither', label: 'Neither' }
] as const;
