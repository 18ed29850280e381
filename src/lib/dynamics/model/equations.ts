import {
  differentiate,
  evaluate,
  negative,
  ONE,
  parameter,
  power,
  product,
  quotient,
  sum,
  toLatex,
  X,
  Y,
  type Expression
} from './expression';
import type { ConsumerGrowthSpec, GrowthSpec, ManagedSpec, ModelSpec } from './spec';

/** One term of an equation, with its sign. */
export interface EquationTerm {
  latex: string;
  /** What the term stands for, in a few words. */
  meaning: string;
  evaluate(x: number, y: number): number;
}

/** One equation of a model, ready to be set. */
export interface Equation {
  lhs: string;
  latex: string;
  latexWithNumbers: string;
  terms: EquationTerm[];
}

/** LaTeX names of the abundances, default x and y. */
export interface StateNames {
  first?: string;
  second?: string;
}

interface Term {
  expression: Expression;
  meaning: string;
}

type Index = 1 | 2;

/** n times growth per head. */
function growthTerm(growth: GrowthSpec | ConsumerGrowthSpec, n: Expression, index: Index): Term {
  const r = parameter(`r_${index}`, growth.r);
  const share = (bottom: Expression) => sum(ONE, negative(quotient(n, bottom)));
  switch (growth.kind) {
    case 'exponential':
      return { expression: product(r, n), meaning: 'growth at a constant rate per head' };
    case 'logistic':
      return {
        expression: product(r, n, share(parameter(`K_${index}`, growth.K))),
        meaning: 'growth that slows towards the carrying capacity'
      };
    case 'allee':
      return {
        expression: product(
          r,
          n,
          share(parameter(`K_${index}`, growth.K)),
          sum(quotient(n, parameter(`A_${index}`, growth.A)), negative(ONE))
        ),
        meaning: 'growth between the Allee threshold and the carrying capacity, decline below'
      };
    case 'leslie':
      return {
        expression: product(r, n, share(product(parameter('g', growth.g), X))),
        meaning: 'growth towards a ceiling that follows the resource'
      };
  }
}

function managementTerms(species: ManagedSpec, n: Expression, index: Index): Term[] {
  const { effort = 0, quota = 0 } = species.removal ?? {};
  const { stocking = 0 } = species;
  const terms: Term[] = [];
  if (effort > 0) {
    terms.push({
      expression: negative(product(parameter(`E_${index}`, effort), n)),
      meaning: 'removal in proportion to effort'
    });
  }
  if (quota > 0) terms.push({ expression: negative(parameter(`Q_${index}`, quota)), meaning: 'quota' });
  if (stocking > 0) terms.push({ expression: parameter(`S_${index}`, stocking), meaning: 'stocking' });
  return terms;
}

function competitionTerms(spec: Extract<ModelSpec, { interaction: 'competition' }>): [Term[], Term[]] {
  const { competition } = spec;
  const meaning = 'loss to competition';
  if (competition.form === 'encounters') {
    const loss = (symbol: string, b: number): Term[] =>
      b === 0 ? [] : [{ expression: negative(product(parameter(symbol, b), X, Y)), meaning }];
    return [loss('b_{12}', competition.b12), loss('b_{21}', competition.b21)];
  }
  const loss = (growth: GrowthSpec, symbol: string, alpha: number, index: Index): Term[] => {
    if (alpha === 0 || growth.kind !== 'logistic') return [];
    const top = product(parameter(`r_${index}`, growth.r), parameter(symbol, alpha), X, Y);
    return [{ expression: negative(quotient(top, parameter(`K_${index}`, growth.K))), meaning }];
  };
  return [
    loss(spec.first.growth, '\\alpha_{12}', competition.alpha12, 1),
    loss(spec.second.growth, '\\alpha_{21}', competition.alpha21, 2)
  ];
}

function feedingTerms(spec: Extract<ModelSpec, { interaction: 'consumer-resource' }>): [Term[], Term[]] {
  const { response, a, e, h = 0, interference = 0 } = spec.feeding;
  const attack = parameter('a', a);
  const prey = response === 'holling-3' ? power(X, 2) : X;
  const crowd: Expression[] = [ONE];
  if (response !== 'holling-1' && h > 0) crowd.push(product(attack, parameter('h', h), prey));
  if (response !== 'holling-1' && interference > 0) crowd.push(product(parameter('w', interference), Y));
  const bottom = sum(...crowd);
  const eaten = (factor: Expression) => quotient(product(factor, attack, prey, Y), bottom);
  return [
    [{ expression: negative(eaten(ONE)), meaning: 'eaten by the consumer' }],
    e === 0 ? [] : [{ expression: eaten(parameter('e', e)), meaning: 'growth from what is eaten' }]
  ];
}

function termsOf(spec: ModelSpec): [Term[], Term[]] {
  const growth1 = growthTerm(spec.first.growth, X, 1);
  const management1 = managementTerms(spec.first, X, 1);
  const management2 = managementTerms(spec.second, Y, 2);
  if (spec.interaction === 'competition') {
    const [loss1, loss2] = competitionTerms(spec);
    return [
      [growth1, ...loss1, ...management1],
      [growthTerm(spec.second.growth, Y, 2), ...loss2, ...management2]
    ];
  }
  const { second } = spec;
  const [loss, gain] = feedingTerms(spec);
  const own: Term[] = [];
  if (second.growth) own.push(growthTerm(second.growth, Y, 2));
  else if ((second.mortality ?? 0) > 0) {
    own.push({ expression: negative(product(parameter('m', second.mortality ?? 0), Y)), meaning: 'death' });
  }
  if ((second.selfLimitation ?? 0) > 0) {
    const crowding = product(parameter('d', second.selfLimitation ?? 0), power(Y, 2));
    own.push({ expression: negative(crowding), meaning: 'loss to crowding among consumers' });
  }
  return [
    [growth1, ...loss, ...management1],
    [...gain, ...own, ...management2]
  ];
}

/** Both right-hand sides as expressions of x and y. */
export function rateExpressions(spec: ModelSpec): [Expression, Expression] {
  const [first, second] = termsOf(spec);
  return [sum(...first.map((term) => term.expression)), sum(...second.map((term) => term.expression))];
}

/**
 * The equations of a model, term by term; a term that is absent or 0 is not printed.
 * @param spec a model without issues
 * @param names LaTeX names of the abundances, e.g. N_1 and N_2
 * @returns one equation a species. A quota is written in full, as in the smooth equations. Never throws.
 */
export function equations(spec: ModelSpec, names: StateNames = {}): [Equation, Equation] {
  const [first, second] = termsOf(spec);
  const write = (terms: Term[], name: string): Equation => {
    const whole = sum(...terms.map((term) => term.expression));
    return {
      lhs: `\\frac{d${name}}{dt}`,
      latex: toLatex(whole, names),
      latexWithNumbers: toLatex(whole, { ...names, numbers: true }),
      terms: terms.map(({ expression, meaning }) => ({
        latex: toLatex(expression, names),
        meaning,
        evaluate: (x, y) => evaluate(expression, x, y)
      }))
    };
  };
  return [write(first, names.first ?? 'x'), write(second, names.second ?? 'y')];
}

/** Partial derivatives of both rates as expressions, row by row. */
export function jacobianTrees(spec: ModelSpec): [[Expression, Expression], [Expression, Expression]] {
  const [f, g] = rateExpressions(spec);
  return [
    [differentiate(f, 'first'), differentiate(f, 'second')],
    [differentiate(g, 'first'), differentiate(g, 'second')]
  ];
}

/** The Jacobian in symbols, as LaTeX, row by row. Never throws. */
export function jacobianExpressions(spec: ModelSpec, names: StateNames = {}): [[string, string], [string, string]] {
  const [[a, b], [c, d]] = jacobianTrees(spec);
  return [
    [toLatex(a, names), toLatex(b, names)],
    [toLatex(c, names), toLatex(d, names)]
  ];
}
