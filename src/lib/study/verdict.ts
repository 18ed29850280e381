import type { StudyQuestion } from '$lib/contracts/study';
import type { EquilibriaReport, ModelSpec, SpeciesKey } from '$lib/dynamics';
import { pointsOf, scaleOf, whoIsAt, type CycleFacts, type LetteredPoint, type Who } from './points';
import { sentencesFor, type Piece, type Situation } from './verdictWords';

/** The verdict that opens the page: who persists and what that means for the species the study protects. */

export type VerdictKind = 'coexistence' | 'exclusion' | 'depends' | 'cycles' | 'crash' | 'unbounded' | 'undecided';
/** What the verdict means for the species that the study protects. */
export type Consequence = 'holds' | 'depends' | 'lost' | 'cycles' | 'unknown';
export type VerdictPart = { text: string } | { species: SpeciesKey; text: string } | { strong: string };
export interface Verdict {
  kind: VerdictKind;
  consequence: Consequence;
  /** Pieces to set: species in their colours, `strong` in bold. The first sentence is the verdict. */
  parts: VerdictPart[];
  plain: string;
}
/** Where today's counts end, when a path has been followed long enough to say. */
export type Outcome = { ends: Who } | { ends: 'cycle' } | { ends: 'unbounded'; species: SpeciesKey };
export interface VerdictExtras {
  model: ModelSpec;
  cycles?: readonly CycleFacts[];
  outcome?: Outcome | null;
}

/** Whether the protected species persist in each of the ways it can end. */
function consequenceOf(kind: VerdictKind, ends: readonly Who[], { protects }: StudyQuestion): Consequence {
  if (protects === 'neither' || kind === 'unbounded' || kind === 'undecided') return 'unknown';
  const kept = ends.map((who) => who === 'both' || (protects !== 'both' && who === protects));
  if (!kept.some(Boolean)) return 'lost';
  if (!kept.every(Boolean)) return 'depends';
  return kind === 'cycles' ? 'cycles' : 'holds';
}

function growsWithoutCeiling(model: ModelSpec): SpeciesKey[] {
  return (['first', 'second'] as const).filter((key) => {
    const growth = model[key].growth;
    return growth?.kind === 'exponential' && growth.r > (model[key].removal?.effort ?? 0);
  });
}

/** Ends that a stable line of states along an axis stands for; a line through both species is judged apart. */
function continuumEnds(report: EquilibriaReport): Who[] {
  const scale = scaleOf(report);
  return report.continua
    .filter((line) => line.stability === 'stable')
    .map((line) => whoIsAt(line.points[Math.floor(line.points.length / 2)] ?? line.from, scale))
    .filter((who) => who !== 'both');
}

/** Every way in which a path can end for good. */
function endsOf({ stable, stableCycle, unlimited, model, report }: Situation): Who[] {
  // Competitors without a ceiling run away from some starts whatever else holds.
  const escapes = model.interaction === 'competition' && stable.length > 0 ? unlimited : [];
  const cycling: Who[] = stableCycle ? ['both'] : [];
  return [...new Set<Who>([...stable.map((point) => point.who), ...continuumEnds(report), ...cycling, ...escapes])];
}

function kindOf(now: Situation, ends: readonly Who[]): VerdictKind {
  const { stable, stableCycle, unlimited, model, points, report } = now;
  const [end] = ends;
  if (ends.length > 1) return 'depends';
  if (end === 'both') return stable.length === 0 && stableCycle ? 'cycles' : 'coexistence';
  if (end === 'neither') return 'crash';
  if (end !== undefined) return 'exclusion';
  const interior = points.filter((point) => point.who === 'both');
  if (report.continua.length > 0 || interior.some((point) => point.stability === 'neutral')) return 'undecided';
  if (unlimited.length > 0) return 'unbounded';
  // With every level bounded and no point that holds, paths around an unstable point can only go round.
  const isSettled = !points.some((point) => point.stability === 'undetermined');
  const canCycle =
    model.interaction === 'consumer-resource' && interior.some((point) => point.stability === 'unstable');
  return isSettled && canCycle ? 'cycles' : 'undecided';
}

/** Joins neighbouring text, so that a reader of `parts` sees one piece a run. */
function joinPieces(pieces: readonly Piece[]): VerdictPart[] {
  const parts: VerdictPart[] = [];
  for (const piece of pieces) {
    if (typeof piece !== 'string') {
      parts.push({ ...piece });
      continue;
    }
    const last = parts[parts.length - 1];
    if (last && 'text' in last && !('species' in last)) last.text += piece;
    else if (piece !== '') parts.push({ text: piece });
  }
  return parts;
}

/** What the parts say, as plain text. */
export function plainOf(parts: readonly VerdictPart[]): string {
  return parts.map((part) => ('strong' in part ? part.strong : part.text)).join('');
}

/**
 * The verdict on a model.
 * @param report equilibria of `extras.model`; `extras.cycles` and `extras.outcome` sharpen it where they are known.
 * @returns the kind, its consequence for the protected species, and the sentences. Never throws.
 */
export function verdict(question: StudyQuestion, report: EquilibriaReport, extras: VerdictExtras): Verdict {
  const points: LetteredPoint[] = pointsOf(report);
  const now: Situation = {
    question,
    model: extras.model,
    report,
    points,
    stable: points.filter((point) => point.stability === 'stable'),
    stableCycle: extras.cycles?.find((cycle) => cycle.stability === 'stable') ?? null,
    outcome: extras.outcome ?? null,
    unlimited: growsWithoutCeiling(extras.model)
  };
  const ends = endsOf(now);
  const kind = kindOf(now, ends);
  const parts = joinPieces(sentencesFor(kind, now, ends));
  const persisting: readonly Who[] = kind === 'cycles' ? ['both'] : ends;
  return { kind, consequence: consequenceOf(kind, persisting, question), parts, plain: plainOf(parts) };
}

/**
 * Where today's counts end, from the end of their path as the engine settles it.
 * @param end indices count in the report's equilibria or absorbing states.
 * @returns null where the path decides nothing, or where it cannot be said which of two species runs away.
 */
export function outcomeOf(
  end: { kind: 'equilibrium' | 'absorbing' | 'cycle'; index: number } | { kind: 'unbounded' | 'undecided' },
  report: EquilibriaReport,
  model: ModelSpec
): Outcome | null {
  switch (end.kind) {
    case 'cycle':
      return { ends: 'cycle' };
    case 'undecided':
      return null;
    case 'unbounded': {
      const [key, other] = growsWithoutCeiling(model);
      return key && !other ? { ends: 'unbounded', species: key } : null;
    }
    default: {
      const list: readonly { x: number; y: number }[] =
        end.kind === 'equilibrium' ? report.equilibria : report.absorbing;
      const point = list[end.index];
      return point ? { ends: whoIsAt(point, scaleOf(report)) } : null;
    }
  }
}
