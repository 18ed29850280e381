import { foundPerArea, plots } from './corrections';
import type { DemoStudy } from './demoStudy';

const series = 'B_consumer_resource_fern_weevil.csv';
const fit = `trajectory match to ${series}, rows 2 to 31 (15 dates, April 2022 to May 2023), all eight quantities free`;

/** Spread between repeated sets of quadrats, as the fit found it. */
const MASS_CV = 0.14;
/** 1 May 2023: 1.46 kg/m² of fern; 354 weevils from 3 m², of which the funnels get 85 %. */
const fernNow = plots(1.46, MASS_CV);
const weevilsNow = foundPerArea({ count: 354, share: 0.85, shareSe: 0.04, area: 3 });
/** 4 April 2022: 5.42 kg/m²; 104 weevils from 3 m². */
const fernFirst = plots(5.42, MASS_CV);
const weevilsFirst = foundPerArea({ count: 104, share: 0.85, shareSe: 0.04, area: 3 });

/** A floating fern and the weevil released against it, which chase each other in cycles. All of it is invented. */
export const raftFern: DemoStudy = {
  key: 'raftFern',
  question: {
    title: 'Raft-fern and weevil in the Third Cut',
    place: 'Third Cut, Quillmere Levels, Isle of Skarrow',
    area: { value: 4200, unit: 'm2' },
    interaction: 'consumer-resource',
    first: {
      common: 'Levels raft-fern',
      scientific: 'Salviniaceae',
      counted: 'drained fresh mass on the water',
      unit: 'kg/m2'
    },
    second: {
      common: 'raft-fern weevil',
      scientific: 'Curculionidae',
      counted: 'adults, by heat-funnel extraction',
      unit: '{ind}/m2'
    },
    protects: 'neither',
    timeUnit: 'd',
    horizon: 730,
    objective:
      'Will the released weevil keep raft-fern below 3 kg/m² on its own over two years, or must the nutrients in the cut be lowered as well?',
    acceptableRisk: 20
  },
  starts: [
    {
      label: '1 May 2023',
      x: fernNow.value,
      y: weevilsNow.value,
      seX: fernNow.se,
      seY: weevilsNow.se,
      source: `${series}, rows 30 and 31: 1.46 kg/m²; 354 adults from 3 m², divided by extraction 0.85 ± 0.04 (B-M1)`
    },
    {
      label: '4 April 2022',
      x: fernFirst.value,
      y: weevilsFirst.value,
      seX: fernFirst.se,
      seY: weevilsFirst.se,
      source: `${series}, rows 2 and 3: 5.42 kg/m²; 104 adults from 3 m², divided by extraction 0.85 ± 0.04 (B-M1)`
    }
  ],
  run: { span: 730, samples: 731, rtol: 1e-8, atol: 1e-10, thresholds: [{ species: 'first', below: 3 }] },
  rates: [
    {
      path: 'first.growth.r',
      value: 0.06269,
      unit: '/d',
      uncertainty: { kind: 'cv', percent: 7 },
      source: { kind: 'own survey', text: fit },
      note: 'At a mean water temperature of 19.4 °C (B-M3); holds near that temperature only.'
    },
    {
      path: 'first.growth.K',
      value: 10.2,
      unit: 'kg/m2',
      uncertainty: { kind: 'cv', percent: 8 },
      source: { kind: 'own survey', text: fit },
      note: 'A full mat at the present nutrients.'
    },
    {
      path: 'second.mortality',
      value: 0.02802,
      unit: '/d',
      uncertainty: { kind: 'cv', percent: 10 },
      source: { kind: 'own survey', text: fit },
      note: 'Moves with e (correlation 0.93) and h (0.88).'
    },
    {
      path: 'feeding.a',
      value: 0.001152,
      unit: 'm2/{ind}/d',
      uncertainty: { kind: 'cv', percent: 10 },
      source: { kind: 'own survey', text: fit },
      note: 'The cage trial (B_functional_response_trial.csv, rows 2 to 33), read with depletion, gives 0.00131 with a CV of 3 %.'
    },
    {
      path: 'feeding.h',
      value: 301.5,
      unit: 'd.{ind}/kg',
      uncertainty: { kind: 'cv', percent: 15 },
      source: { kind: 'own survey', text: fit },
      note: 'The cage trial, read with depletion, gives 242 with a CV of 7 %. Moves with e (correlation 0.97).'
    },
    {
      path: 'feeding.e',
      value: 19.6,
      unit: '{ind}/kg',
      uncertainty: { kind: 'cv', percent: 21 },
      source: { kind: 'own survey', text: fit },
      note: 'Moves with h (correlation 0.97) and m (0.93): the three are only known together.'
    }
  ]
};
