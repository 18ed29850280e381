import { z } from 'zod';

/** Closed lists that forms, API and engine share. Unit codes follow UCUM; `$lib/study/units` shows them as people write them. */
export const timeUnits = ['a', 'mo', 'wk', 'd'] as const;
export const areaUnits = ['har', 'km2', 'm2'] as const;
export const abundanceUnits = [
  '{ind}',
  '{ind}/har',
  '{ind}/km2',
  '{ind}/m2',
  '{pair}/har',
  '{pair}/km2',
  'kg/har',
  'kg/m2',
  'g/m2',
  't/km2',
  '%'
] as const;
export type TimeUnit = (typeof timeUnits)[number];
export type AreaUnit = (typeof areaUnits)[number];
export type AbundanceUnit = (typeof abundanceUnits)[number];

const words = (max: number, what: string) =>
  z
    .string()
    .trim()
    .min(1, { error: `Say ${what}.` })
    .max(max, { error: `Keep this under ${max} characters.` });
const optionalWords = (max: number) =>
  z
    .string()
    .trim()
    .max(max, { error: `Keep this under ${max} characters.` })
    .default('');

const speciesFields = (which: string) =>
  z.strictObject({
    common: words(80, `the common name of the ${which} species`),
    scientific: optionalWords(120),
    /** What one unit of abundance is: adults, clumps, dry mass, … */
    counted: words(80, `what is counted of the ${which} species`),
    unit: z.enum(abundanceUnits, { error: 'Choose a unit from the list.' })
  });

export const interactionKinds = ['competition', 'consumer-resource'] as const;
/** Whose persistence the study is about; it decides what a verdict means, not what it is. */
export const protectedChoices = ['first', 'second', 'both', 'neither'] as const;

export const StudyQuestion = z.strictObject({
  title: words(120, 'what the study is called'),
  place: words(160, 'where it is'),
  area: z.strictObject({
    value: z
      .number({ error: 'Give the area as a number.' })
      .positive({ error: 'The area must be above 0.' })
      .max(1e12, { error: 'This area is larger than the Earth: check the unit.' }),
    unit: z.enum(areaUnits)
  }),
  interaction: z.enum(interactionKinds, { error: 'Choose how the two species meet.' }),
  first: speciesFields('first'),
  second: speciesFields('second'),
  protects: z.enum(protectedChoices).default('both'),
  timeUnit: z.enum(timeUnits),
  horizon: z
    .number({ error: 'Give the horizon as a number.' })
    .positive({ error: 'The horizon must be above 0.' })
    .max(1e6, { error: 'The horizon is too long.' }),
  objective: words(600, 'what the study should decide'),
  /** Per cent: how often missing the objective is acceptable. */
  acceptableRisk: z
    .number({ error: 'Give the risk as a percentage.' })
    .min(0, { error: 'Between 0 and 100 %.' })
    .max(100, { error: 'Between 0 and 100 %.' })
});
export type StudyQuestion = z.infer<typeof StudyQuestion>;

export const studyStates = ['open', 'archived'] as const;
export const studyRoles = ['contributor', 'reviewer', 'observer'] as const;
export type StudyRole = (typeof studyRoles)[number];

/** Addresses of the list page: kept in the address bar. */
export const StudyListQuery = z.object({
  q: z.string().trim().max(200).catch(''),
  state: z.enum(['open', 'archived', 'all']).catch('open'),
  kind: z.enum(['any', ...interactionKinds]).catch('any'),
  sort: z.enum(['changed', 'title', 'place', 'created']).catch('changed'),
  page: z.coerce.number().int().min(1).max(10_000).catch(1)
});
export type StudyListQuery = z.infer<typeof StudyListQuery>;
