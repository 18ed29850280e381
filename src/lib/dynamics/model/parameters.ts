import type { ModelSpec } from './spec';

/** One number of a model document that can be changed, by where it stands. */
export interface ModelParameter {
  /** JSON path, e.g. `first.removal.effort`. */
  path: string;
  /** Symbol as LaTeX, e.g. `\alpha_{12}`. */
  symbol: string;
  value: number;
}

const SYMBOLS: Record<string, string> = {
  'first.removal.effort': 'E_1',
  'first.removal.quota': 'Q_1',
  'first.stocking': 'S_1',
  'second.removal.effort': 'E_2',
  'second.removal.quota': 'Q_2',
  'second.stocking': 'S_2',
  'second.mortality': 'm',
  'second.selfLimitation': 'd',
  'competition.alpha12': '\\alpha_{12}',
  'competition.alpha21': '\\alpha_{21}',
  'competition.b12': 'b_{12}',
  'competition.b21': 'b_{21}',
  'feeding.a': 'a',
  'feeding.h': 'h',
  'feeding.e': 'e',
  'feeding.interference': 'w',
  'second.growth.g': 'g'
};

/** Optional numbers count as parameters too, at the 0 that leaving them out means. */
const OPTIONAL: Record<ModelSpec['interaction'], readonly string[]> = {
  competition: [
    'first.removal.effort',
    'first.removal.quota',
    'first.stocking',
    'second.removal.effort',
    'second.removal.quota',
    'second.stocking'
  ],
  'consumer-resource': [
    'first.removal.effort',
    'first.removal.quota',
    'first.stocking',
    'second.selfLimitation',
    'second.removal.effort',
    'second.removal.quota',
    'second.stocking'
  ]
};

type Json = { [key: string]: unknown };

function isRecord(value: unknown): value is Json {
  return typeof value === 'object' && value !== null;
}

function read(spec: ModelSpec, path: string): unknown {
  let value: unknown = spec;
  for (const key of path.split('.')) value = isRecord(value) ? value[key] : undefined;
  return value;
}

function growthPaths(spec: ModelSpec, key: 'first' | 'second'): string[] {
  const { growth } = spec[key];
  if (growth === undefined) return [];
  return Object.keys(growth)
    .filter((name) => name !== 'kind')
    .map((name) => `${key}.growth.${name}`);
}

/** LaTeX symbol of the number at a path; the last key where the path is not known. */
export function symbolOf(path: string): string {
  const known = SYMBOLS[path];
  if (known !== undefined) return known;
  const [key, , name] = path.split('.');
  return name === undefined ? path : `${name}_${key === 'first' ? 1 : 2}`;
}

/**
 * Every number of a model that can be varied, in the order of the document.
 * @returns paths, LaTeX symbols and present values; an optional number that is left out is listed at 0. Never throws.
 */
export function parametersOf(spec: ModelSpec): ModelParameter[] {
  const paths = [...growthPaths(spec, 'first')];
  if (spec.interaction === 'competition') {
    paths.push(...growthPaths(spec, 'second'));
    paths.push(
      ...(spec.competition.form === 'coefficients'
        ? ['competition.alpha12', 'competition.alpha21']
        : ['competition.b12', 'competition.b21'])
    );
  } else {
    paths.push(...(spec.second.growth === undefined ? ['second.mortality'] : growthPaths(spec, 'second')));
    paths.push('feeding.a', 'feeding.e');
    if (spec.feeding.response !== 'holling-1') paths.push('feeding.h', 'feeding.interference');
  }
  paths.push(...OPTIONAL[spec.interaction]);
  return paths.map((path) => {
    const value = read(spec, path);
    return { path, symbol: symbolOf(path), value: typeof value === 'number' ? value : 0 };
  });
}

function replaced(value: Json, keys: readonly string[], number: number): Json {
  const [key = '', ...rest] = keys;
  if (rest.length === 0) return { ...value, [key]: number };
  const inner = value[key];
  return { ...value, [key]: replaced(isRecord(inner) ? inner : {}, rest, number) };
}

/**
 * A copy of a model with one number changed.
 * @param path one that parametersOf lists; anything else is refused
 * @returns a new document; the old one is untouched
 * @throws RangeError when the model has no such parameter. Whether the value is sound is for checkModel to say.
 */
export function withParameter(spec: ModelSpec, path: string, value: number): ModelSpec {
  if (!parametersOf(spec).some((parameter) => parameter.path === path)) {
    throw new RangeError(`This model has no parameter ${path}.`);
  }
  return replaced(spec as unknown as Json, path.split('.'), value) as unknown as ModelSpec;
}
