import { checkModel, type ModelSpec } from '$lib/dynamics';
import { refusal } from '../errors';

/** Throws 422 naming every field where parts of a model document do not go together; `prefix` is where it stands. */
export function refuseModel(model: ModelSpec, prefix = 'model'): void {
  const issues = checkModel(model).map(({ path, message }) => ({
    path: `${prefix}.${path}`,
    message: `${path.split('.').at(-1) ?? path} ${message}`
  }));
  const first = issues[0];
  if (first) throw refusal('input.invalid', { message: `${first.path}: ${first.message}`, issues });
}
