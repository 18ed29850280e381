/** Types of the parts of odex 2.0.4 that are used; the package ships source that a strict check does not accept. */
export type Derivative = (x: number, y: number[]) => number[];

/** Called after every step; `dense` reads component c inside the step. Returning false halts. */
export type OutputFunction = (
  nr: number,
  xOld: number,
  x: number,
  y: number[],
  dense?: (c: number, x: number) => number
) => boolean | void;

export declare const Outcome: { readonly Converged: 0; readonly MaxStepsExceeded: 1; readonly EarlyReturn: 2 };

export declare class Solver {
  constructor(n: number);
  maxSteps: number;
  initialStepSize: number;
  maxStepSize: number;
  denseOutput: boolean;
  relativeTolerance: number | number[];
  absoluteTolerance: number | number[];
  solve(
    f: Derivative,
    x: number,
    y0: number[],
    xEnd: number,
    solOut?: OutputFunction
  ): { y: number[]; outcome: 0 | 1 | 2; nStep: number; xEnd: number; nAccept: number; nReject: number; nEval: number };
}
