import type { ModelStructure, Start } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { equations, type ModelSpec } from '$lib/dynamics';
import { displayUnit, placeholderModel } from '$lib/study';

export interface WrittenTerm {
  tex: string;
  meaning: string;
  /** Unit of the term, as people write it: abundance per time. */
  unit: string;
  /** At today's counts, in that unit; null while the model or the counts are missing. */
  now: number | null;
}
export interface WrittenEquation {
  species: 'first' | 'second';
  symbols: string;
  /** With the study's own rates; null while one is missing. */
  numbers: string | null;
  terms: WrittenTerm[];
}
export interface Written {
  equations: WrittenEquation[];
  /** The state the values are for. */
  at: { x: number; y: number; label: string } | null;
}

/** The equations of a study: in symbols always, in numbers and term by term once its rates are there. */
export function writeEquations(
  structure: ModelStructure,
  model: ModelSpec | null,
  today: Start | null,
  question: StudyQuestion
): Written {
  const written = equations(model ?? placeholderModel(structure));
  const at = model && today ? { x: today.x, y: today.y, label: today.label } : null;
  const species = ['first', 'second'] as const;
  return {
    at,
    equations: written.map((equation, i) => {
      const which = species[i] ?? 'second';
      return {
        species: which,
        symbols: `${equation.lhs} = ${equation.latex}`,
        numbers: model ? `${equation.lhs} = ${equation.latexWithNumbers}` : null,
        terms: equation.terms.map((term) => ({
          tex: term.latex,
          meaning: term.meaning,
          unit: displayUnit(`${question[which].unit}/${question.timeUnit}`).text,
          now: at ? term.evaluate(at.x, at.y) : null
        }))
      };
    })
  };
}
