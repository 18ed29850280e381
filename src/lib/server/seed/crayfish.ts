import type { DemoStudy } from './demoStudy';
import { countPerHectare } from './corrections';

const series = 'A_competition_crayfish.csv';
const bays = 'A_reference_single_species.csv';
const fit = `joint fit to ${series}, rows 4 to 27 (24 counts, 2013 to 2024), with r and K held near the single-species bays of ${bays}`;

/** Summer 2024: 29 and 137 caught in 240 trap-nights. */
const native2024 = countPerHectare({ count: 29, effort: 240, catchability: 0.00052, catchabilitySe: 0.00009 });
const saddleback2024 = countPerHectare({ count: 137, effort: 240, catchability: 0.0006, catchabilitySe: 0.00011 });
/** Summer 2013, the first visit after the newcomer came: 100 and 1. */
const native2013 = countPerHectare({ count: 100, effort: 240, catchability: 0.00052, catchabilitySe: 0.00009 });
const saddleback2013 = countPerHectare({ count: 1, effort: 240, catchability: 0.0006, catchabilitySe: 0.00011 });

/** Two crayfish in one arm of the lake. Rates are the estimates of the joint fit. All of it is invented. */
export const crayfish: DemoStudy = {
  key: 'crayfish',
  question: {
    title: 'Crayfish of the North Arm',
    place: 'North Arm, Quillmere Levels, Isle of Skarrow',
    area: { value: 12.5, unit: 'har' },
    interaction: 'competition',
    first: {
      common: 'Skarrow stream crayfish',
      scientific: 'Astacidae',
      counted: 'trappable adults on the littoral',
      unit: '{ind}/har'
    },
    second: {
      common: 'saddleback crayfish',
      scientific: 'Cambaridae',
      counted: 'trappable adults on the littoral',
      unit: '{ind}/har'
    },
    protects: 'first',
    timeUnit: 'a',
    horizon: 20,
    objective:
      'How hard must saddleback crayfish be trapped for Skarrow stream crayfish to stay in the North Arm, or come back to it?',
    acceptableRisk: 10
  },
  starts: [
    {
      label: 'Summer 2024',
      x: native2024.value,
      y: saddleback2024.value,
      seX: native2024.se,
      seY: saddleback2024.se,
      source: `${series}, rows 26 and 27: 29 and 137 in 240 trap-nights, by catchability 0.00052 and 0.0006 ha per trap-night (A-M1, A-M2)`
    },
    {
      label: 'Summer 2013',
      x: native2013.value,
      y: saddleback2013.value,
      seX: native2013.se,
      seY: saddleback2013.se,
      source: `${series}, rows 4 and 5: 100 and 1 in 240 trap-nights`
    }
  ],
  run: { span: 20, samples: 201, rtol: 1e-8, atol: 1e-10, thresholds: [{ species: 'first', below: 20 }] },
  rates: [
    {
      path: 'first.growth.r',
      value: 0.6779,
      unit: '/a',
      uncertainty: { kind: 'cv', percent: 26 },
      source: { kind: 'own survey', text: `${fit}; South Arm bay, rows 2 to 12` },
      note: '95 % limits 0.41 to 1.13. The bay alone gives 0.674.'
    },
    {
      path: 'first.growth.K',
      value: 903.3,
      unit: '{ind}/har',
      uncertainty: { kind: 'cv', percent: 8 },
      source: { kind: 'own survey', text: `${fit}; South Arm bay, rows 2 to 12` },
      note: 'Per hectare of littoral to 3 m depth, not of lake.'
    },
    {
      path: 'second.growth.r',
      value: 1.076,
      unit: '/a',
      uncertainty: { kind: 'cv', percent: 11 },
      source: { kind: 'own survey', text: `${fit}; East Arm bay, rows 13 to 23` },
      note: '95 % limits 0.87 to 1.33.'
    },
    {
      path: 'second.growth.K',
      value: 1144,
      unit: '{ind}/har',
      uncertainty: { kind: 'cv', percent: 8 },
      source: { kind: 'own survey', text: `${fit}; East Arm bay, rows 13 to 23` }
    },
    {
      path: 'competition.alpha12',
      value: 1.514,
      unit: '1',
      uncertainty: { kind: 'cv', percent: 29 },
      source: { kind: 'own survey', text: fit },
      note: 'Moves with K of the native (correlation 0.58). One series of two species together: the least certain rate.'
    },
    {
      path: 'competition.alpha21',
      value: 0.7898,
      unit: '1',
      uncertainty: { kind: 'cv', percent: 18 },
      source: { kind: 'own survey', text: fit },
      note: 'Moves with K of the newcomer (correlation 0.56).'
    }
  ]
};
