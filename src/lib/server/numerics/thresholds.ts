import { ThresholdsRequest } from '$lib/contracts/thresholds';
import { checkModel, parametersOf, thresholds, withParameter, type ThresholdReport } from '$lib/dynamics';
import { parseValue } from '../api/problem';
import { invalid, refusal } from '../errors';
import { deadline } from './deadline';
import { refuseModel } from './refuseModel';

type Json = Record<string, unknown>;

function isRecord(value: unknown): value is Json {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** A copy of a body whose model holds the first value of the range where the swept number was left out. */
function withSweptNumber(body: unknown): unknown {
  if (!isRecord(body) || !isRecord(body.model) || typeof body.parameter !== 'string') return body;
  const first: unknown = Array.isArray(body.range) ? body.range[0] : undefined;
  const model = structuredClone(body.model);
  const keys = body.parameter.split('.');
  const name = keys.pop() ?? '';
  let holder: Json = model;
  for (const key of keys) {
    const inner = Object.hasOwn(holder, key) ? holder[key] : undefined;
    if (!isRecord(inner)) return body;
    holder = inner;
  }
  if (Object.hasOwn(holder, name) || name === '__proto__') return body;
  holder[name] = first;
  return { ...body, model };
}

/**
 * The question on the wire. The swept number may be missing from the model: the range says what it is. Everything else that
 * is missing or unknown is refused by its path.
 */
export function readThresholdsRequest(body: unknown): ThresholdsRequest {
  const completed = withSweptNumber(body);
  if (completed !== body) {
    const parsed = ThresholdsRequest.safeParse(completed);
    if (parsed.success) return parsed.data;
  }
  return parseValue(ThresholdsRequest, body);
}

/**
 * Branches of equilibria over one parameter and where they change. Throws 422 for a model whose parts do not go together,
 * an unknown parameter, a range at whose ends there is no model, and where the search would take too long.
 */
export function computeThresholds(request: ThresholdsRequest): ThresholdReport {
  const { model, parameter, range } = request;
  refuseModel(model);
  const paths = parametersOf(model).map(({ path }) => path);
  if (!paths.includes(parameter)) {
    throw invalid('parameter', `This model has no parameter ${parameter}. It has ${paths.join(', ')}.`);
  }
  range.forEach((value, i) => {
    const issue = checkModel(withParameter(model, parameter, value))[0];
    if (issue) throw invalid(`range.${i}`, `At ${value} this is no model: ${issue.path} ${issue.message}`);
  });
  const stop = deadline();
  let late = false;
  const report = thresholds(model, parameter, range, { shouldStop: () => (late ||= stop()) });
  if (late) {
    const message = 'The search was taking too long. Ask for a shorter range.';
    throw refusal('engine.tooLong', { message, issues: [{ path: 'range', message }] });
  }
  if (!isWritable(report)) {
    const message = 'Over this range the rates of the model are too far apart in size for the numbers of a computer.';
    throw refusal('engine.failed', { message, issues: [{ path: 'range', message }] });
  }
  return report;
}

function isWritable({ branches, thresholds: found }: ThresholdReport): boolean {
  const columns = branches.flatMap(({ parameter, x, y }) => [parameter, x, y]);
  return columns.every((column) => column.every(Number.isFinite)) && found.every(({ value }) => Number.isFinite(value));
}
