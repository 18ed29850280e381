import type { Start } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import { compile, type Continuum, type LimitCycle, type ModelSpec } from '$lib/dynamics';
import { equilibriumLook } from '$lib/charts/planeHelpers';
import type { PlaneBasin } from '$lib/charts/types';
import type { PlaneData } from '$lib/charts/planeLayout';
import { displayUnit, pointTitle, sentenceCase, type LetteredPoint, type PlaneResults } from '$lib/study';
import { shortNames } from '../shortNames';

interface Drawn {
  question: StudyQuestion;
  model: ModelSpec;
  points: readonly LetteredPoint[];
  continua: readonly Continuum[];
  cycles: readonly LimitCycle[];
  plane: PlaneResults;
  paths: readonly { label: string; points: { x: number; y: number }[] }[];
  starts: readonly Start[];
}

/** The results of a study as the state plane chart wants them: species by their names, outcomes in words. */
export function planeProps({ question, model, points, continua, cycles, plane, paths, starts }: Drawn): PlaneData {
  const holds = (species: 'first' | 'second') => `${shortNames(question)[species]} holds steady`;
  const axis = (species: 'first' | 'second') => ({
    label: `${sentenceCase(question[species].common)}`,
    unit: displayUnit(question[species].unit).text,
    short: sentenceCase(shortNames(question)[species])
  });
  const labelled = new Set<string>();
  const today = starts[0];
  return {
    window: plane.window,
    axes: { x: axis('first'), y: axis('second') },
    isoclines: plane.isoclines
      .filter((line) => !line.trivial)
      .map(({ species, points: line }) => {
        const label = labelled.has(species) ? undefined : holds(species);
        labelled.add(species);
        return { species, points: line, ...(label ? { label } : {}) };
      }),
    field: fieldOf(model),
    equilibria: points.map((point) => ({
      x: point.x,
      y: point.y,
      letter: point.letter,
      name: pointTitle(point.who, question),
      description: point.equilibrium?.class ?? 'held by a quota',
      ...equilibriumLook(point.equilibrium?.class ?? 'held', point.stability)
    })),
    continua: continua.map((c) => ({
      points: c.points,
      stable: c.stability === 'stable' ? true : c.stability === 'unstable' ? false : null,
      label: 'rest anywhere here'
    })),
    basins: basinsShown(plane, points),
    separatrices: plane.separatrices.filter((s) => s.kind === 'stable').map(({ points: line }) => ({ points: line })),
    cycles: cycles.map((c) => ({ points: c.points, stable: c.stability === 'stable', label: 'the cycle' })),
    trajectories: paths.map((path, i) => ({
      points: path.points,
      label: paths.length > 1 ? String(i + 1) : '',
      emphasised: i === 0
    })),
    counts: today
      ? [
          {
            x: today.x,
            y: today.y,
            label: today.label,
            ...(today.seX === undefined ? {} : { seX: today.seX }),
            ...(today.seY === undefined ? {} : { seY: today.seY })
          }
        ]
      : [],
    starts: starts.slice(1).map(({ x, y, label }) => ({ x, y, label }))
  };
}

/** Basins tinted by who is left, and where they end in the letters of the table; ends that nobody can name stay blank. */
function basinsShown(plane: PlaneResults, points: readonly LetteredPoint[]): PlaneBasin[] {
  return plane.basins.basins.flatMap(({ end, polygons }): PlaneBasin[] => {
    if (end.kind === 'cycle') return [{ tint: 'cycles', polygons, label: 'ends on the cycle' }];
    const point = points.find(
      ({ equilibrium, absorbing, index }) =>
        index === end.index && (end.kind === 'equilibrium' ? equilibrium !== null : absorbing !== null)
    );
    const named = point && (end.kind === 'equilibrium' || end.kind === 'absorbing');
    return named ? [{ tint: point.who, polygons, label: `ends at ${point.letter}` }] : [];
  });
}

/** Direction of change anywhere, for the chart to sample at the width it is drawn. */
function fieldOf(model: ModelSpec) {
  const system = compile(model);
  const rate = new Float64Array(2);
  return (x: number, y: number) => {
    system.rhs(x, y, rate);
    return { dx: rate[0] ?? 0, dy: rate[1] ?? 0 };
  };
}
