import type { z } from 'zod';
import type { EquilibriaRequest } from '$lib/contracts/trajectory';
import { findEquilibria, type EquilibriaReport, type Equilibrium } from '$lib/dynamics';
import { refusal } from '../errors';
import { refuseModel } from './refuseModel';

/**
 * Every equilibrium of a model, classified. Throws 422 for a model whose parts do not go together, and where a number of
 * the answer cannot be written, as when rates differ by hundreds of orders of magnitude.
 */
export function computeEquilibria(request: z.output<typeof EquilibriaRequest>): EquilibriaReport {
  refuseModel(request.model);
  const report = findEquilibria(request.model, { includeInfeasible: request.includeInfeasible ?? false });
  if (!report.equilibria.every(isWritable)) {
    const message = 'The rates of this model are too far apart in size for the numbers of a computer.';
    throw refusal('engine.failed', { message, issues: [{ path: 'model', message }] });
  }
  return report;
}

function isWritable({ x, y, jacobian, trace, determinant, eigenvalues }: Equilibrium): boolean {
  const numbers = [x, y, ...jacobian.flat(), trace, determinant, ...eigenvalues.flatMap(({ re, im }) => [re, im])];
  return numbers.every(Number.isFinite);
}
