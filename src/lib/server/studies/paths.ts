import type { RunSettings, Start } from '$lib/contracts/content';
import { simulate, type ModelSpec, type TrajectoryResult } from '$lib/dynamics';
import { checkPath, CHECK_MS } from '../numerics/trajectory';
import type { CrossCheck } from '../numerics/crossCheck';
import { ANSWER_MS, deadline } from '../numerics/deadline';
import { ResultCache } from './cache';
import { fingerprintOf } from './fingerprint';

export interface Path {
  start: Start;
  result: TrajectoryResult;
  crossCheck: CrossCheck;
}

const cache = new ResultCache<Path[]>(12);

/** The path from every start, each checked by a second method. All of them together have the time of one answer. */
export function pathsFor(model: ModelSpec, starts: readonly Start[], run: RunSettings): Path[] {
  const key = fingerprintOf({ model, starts, run });
  const follow = (): Path[] => {
    const shouldStop = deadline(ANSWER_MS);
    const checksEnd = performance.now() + ANSWER_MS + CHECK_MS;
    return starts.map((start) => {
      const result = simulate(model, {
        start: { x: start.x, y: start.y },
        span: [0, run.span],
        samples: run.samples,
        rtol: run.rtol,
        atol: run.atol === 0 ? Number.MIN_VALUE : run.atol,
        thresholds: run.thresholds,
        shouldStop
      });
      const reached = result.outcome.status !== 'failed';
      return {
        start,
        result,
        crossCheck: reached
          ? checkPath(model, result, run, Math.min(CHECK_MS, checksEnd - performance.now()))
          : { method: 'odex', largestRelativeDifference: null, reason: 'The run did not reach its end.' }
      };
    });
  };
  const isFinal = ({ result: { outcome } }: Path) => outcome.status !== 'failed' || outcome.reason !== 'budget';
  return cache.get(key, follow, (paths) => paths.every(isFinal));
}
