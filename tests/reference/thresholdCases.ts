/**
 * Values of a parameter at which equilibria change, complete within each sweep. Closed forms, or roots to 60 digits with
 * zero trace or determinant asserted to 38; sign of the first Lyapunov coefficient by two formulas (Kuznetsov;
 * Guckenheimer and Holmes). Checked by Newton's method on the augmented system in double precision.
 */
import type { ModelSpec } from '$lib/dynamics';

export interface ThresholdCase {
  id: string;
  title: string;
  document: ModelSpec;
  parameter: string;
  range: [number, number];
  wanted: {
    kind: 'transcritical' | 'saddle-node' | 'hopf';
    value: number;
    x: number;
    y: number;
    criticality: 'supercritical' | 'subcritical' | null;
    /** On which side of the value the equilibrium is unstable. */
    unstable?: 'above' | 'below';
  }[];
}

const saturating = (K: number, m: number): ModelSpec => ({
  interaction: 'consumer-resource',
  first: { growth: { kind: 'logistic', r: 1, K } },
  second: { mortality: m },
  feeding: { response: 'holling-2', a: 0.1, h: 0.5, e: 0.5 }
});

export const thresholdCases: ThresholdCase[] = [
  {
    id: 'THR-01',
    title: 'Competition: how strong the second species must be to exclude the first',
    document: {
      interaction: 'competition',
      first: { growth: { kind: 'logistic', r: 1.2, K: 100 } },
      second: { growth: { kind: 'logistic', r: 0.8, K: 80 } },
      competition: { form: 'coefficients', alpha12: 0, alpha21: 0.5 }
    },
    parameter: 'competition.alpha12',
    range: [0, 2],
    wanted: [{ kind: 'transcritical', value: 1.25, x: 0, y: 80, criticality: null }]
  },
  {
    id: 'THR-02',
    title: 'Enrichment with a saturating consumer: persistence, then oscillation',
    document: saturating(5, 0.5),
    parameter: 'first.growth.K',
    range: [5, 150],
    wanted: [
      { kind: 'transcritical', value: 20, x: 20, y: 0, criticality: null },
      { kind: 'hopf', value: 60, x: 20, y: 13.333333333333334, criticality: 'supercritical', unstable: 'above' }
    ]
  },
  {
    id: 'THR-03',
    title: 'Largest quota a resource sustains, r K/4',
    document: {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 1, K: 100 } },
      second: { mortality: 0.3 },
      feeding: { response: 'holling-1', a: 0.01, e: 0.2 }
    },
    parameter: 'first.removal.quota',
    range: [0, 40],
    wanted: [{ kind: 'saddle-node', value: 25, x: 50, y: 0, criticality: null }]
  },
  {
    id: 'THR-04',
    title: 'Harvest of the resource: loss of the consumer, then of the resource',
    document: {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'logistic', r: 1, K: 100 } },
      second: { mortality: 0.2 },
      feeding: { response: 'holling-1', a: 0.02, e: 0.25 }
    },
    parameter: 'first.removal.effort',
    range: [0, 1.5],
    wanted: [
      { kind: 'transcritical', value: 0.6, x: 40, y: 0, criticality: null },
      { kind: 'transcritical', value: 1, x: 0, y: 0, criticality: null }
    ]
  },
  {
    id: 'THR-05',
    title: 'Strong Allee effect: mortality of the consumer',
    document: {
      interaction: 'consumer-resource',
      first: { growth: { kind: 'allee', r: 0.4, K: 100, A: 20 } },
      second: { mortality: 0.1 },
      feeding: { response: 'holling-1', a: 0.01, e: 0.3 }
    },
    parameter: 'second.mortality',
    range: [0.07, 0.4],
    wanted: [
      { kind: 'hopf', value: 0.18, x: 60, y: 32, criticality: 'supercritical', unstable: 'below' },
      { kind: 'transcritical', value: 0.3, x: 100, y: 0, criticality: null }
    ]
  },
  {
    id: 'THR-06',
    title: 'Saturating consumer: its mortality at K = 60',
    document: saturating(60, 0.3),
    parameter: 'second.mortality',
    range: [0.2, 0.9],
    wanted: [
      { kind: 'hopf', value: 0.5, x: 20, y: 13.333333333333334, criticality: 'supercritical', unstable: 'below' },
      { kind: 'transcritical', value: 0.75, x: 60, y: 0, criticality: null }
    ]
  }
];
