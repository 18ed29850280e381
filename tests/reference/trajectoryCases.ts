/**
 * Paths with known answers. States come from a Taylor series of order 40 (50 for the near-extinction case) carried to about
 * 50 digits and agree with an extrapolation method to 1e-22; quota and uncoupled cases are closed forms. Each number is the
 * double nearest to that value.
 */
import type { ModelSpec } from '$lib/dynamics';

export interface TrajectoryCase {
  id: string;
  title: string;
  document: ModelSpec;
  start: { x: number; y: number };
  times: number[];
  states: [number, number][];
  /** First crossing of each level. */
  events: { species: 'first' | 'second'; level: number; direction: 'up' | 'down'; t: number }[];
  tolerance: { state: number | null; logState: number | null; eventTime: number | null };
}

export const trajectoryCases: TrajectoryCase[] = [
  {
    id: 'S-TR-01',
    title: 'Classical predator-prey, three and more turns of a closed orbit',
    document: {
      interaction: 'consumer-resource',
      first: {
        growth: {
          kind: 'exponential',
          r: 0.8
        }
      },
      second: {
        mortality: 0.3
      },
      feeding: {
        response: 'holling-1',
        a: 0.02,
        e: 0.25
      }
    },
    start: {
      x: 120,
      y: 40
    },
    times: [0, 5, 10, 13, 20, 40, 100],
    states: [
      [120.0, 40.0],
      [26.168355129807686, 47.422447708230536],
      [55.947143126344024, 23.80118460295196],
      [118.90837065722114, 36.79351118188564],
      [25.32681662528331, 35.05196340452569],
      [119.6297846039778, 41.95353675148962],
      [26.295315410829264, 33.1928084396334]
    ],
    events: [
      {
        species: 'second',
        level: 60,
        direction: 'up',
        t: 1.7568410729905002
      },
      {
        species: 'first',
        level: 30,
        direction: 'down',
        t: 4.326096807305817
      }
    ],
    tolerance: {
      state: 1e-8,
      logState: null,
      eventTime: 1e-8
    }
  },
  {
    id: 'S-TR-02',
    title: 'Competition approaching coexistence',
    document: {
      interaction: 'competition',
      first: {
        growth: {
          kind: 'logistic',
          r: 1.2,
          K: 100
        }
      },
      second: {
        growth: {
          kind: 'logistic',
          r: 0.8,
          K: 80
        }
      },
      competition: {
        form: 'coefficients',
        alpha12: 0.6,
        alpha21: 0.5
      }
    },
    start: {
      x: 5,
      y: 120
    },
    times: [0, 1, 2, 5, 10, 20, 50],
    states: [
      [5.0, 120.0],
      [7.3419106730846915, 92.25427768312093],
      [11.677084778943556, 82.36864388462774],
      [36.950882318065524, 68.06044170358585],
      [66.6003548723373, 50.72151547710738],
      [73.77364735487572, 43.465548252147435],
      [74.28543508009898, 42.85747773884243]
    ],
    events: [
      {
        species: 'first',
        level: 50,
        direction: 'up',
        t: 6.452366797626329
      },
      {
        species: 'second',
        level: 60,
        direction: 'down',
        t: 6.878904425270868
      }
    ],
    tolerance: {
      state: 1e-8,
      logState: null,
      eventTime: 1e-8
    }
  },
  {
    id: 'S-TR-03',
    title: 'Type II predator, damped spiral',
    document: {
      interaction: 'consumer-resource',
      first: {
        growth: {
          kind: 'logistic',
          r: 1,
          K: 45
        }
      },
      second: {
        mortality: 0.5
      },
      feeding: {
        response: 'holling-2',
        a: 0.1,
        h: 0.5,
        e: 0.5
      }
    },
    start: {
      x: 40,
      y: 2
    },
    times: [0, 1, 5, 10, 20, 50, 100],
    states: [
      [40.0, 2.0],
      [41.02712697683083, 2.370831385576402],
      [39.05895633371073, 4.665936960962845],
      [31.449842854784908, 9.40848994467291],
      [16.886629681780835, 11.021476515132491],
      [19.974758248914455, 11.21415928863598],
      [20.002417258677106, 11.112218497583937]
    ],
    events: [
      {
        species: 'second',
        level: 10,
        direction: 'up',
        t: 10.571203328049013
      },
      {
        species: 'first',
        level: 20,
        direction: 'down',
        t: 15.299653283399524
      }
    ],
    tolerance: {
      state: 1e-8,
      logState: null,
      eventTime: 1e-8
    }
  },
  {
    id: 'S-TR-05',
    title: 'Stiff: generalist predator that adjusts a thousand times faster than the prey',
    document: {
      interaction: 'consumer-resource',
      first: {
        growth: {
          kind: 'logistic',
          r: 0.5,
          K: 200
        }
      },
      second: {
        growth: {
          kind: 'logistic',
          r: 1000,
          K: 8
        }
      },
      feeding: {
        response: 'holling-2',
        a: 0.04,
        h: 0.1,
        e: 0.05
      }
    },
    start: {
      x: 5,
      y: 0.01
    },
    times: [0, 0.001, 0.01, 0.1, 1, 10, 30],
    states: [
      [5.0, 0.01],
      [5.002434711803139, 0.027124824399185447],
      [5.01915391364684, 7.72006174600669],
      [5.098290438261167, 8.000079928767377],
      [5.957832040322301, 8.000093090773044],
      [25.639036655556417, 8.000372017698652],
      [105.19373475292137, 8.001184625225346]
    ],
    events: [
      {
        species: 'second',
        level: 7.9,
        direction: 'up',
        t: 0.011051923097596955
      }
    ],
    tolerance: {
      state: 1e-7,
      logState: null,
      eventTime: 1e-7
    }
  },
  {
    id: 'S-TR-06',
    title: 'Near-extinction dips: populations fall to about 1e-31',
    document: {
      interaction: 'consumer-resource',
      first: {
        growth: {
          kind: 'exponential',
          r: 1
        }
      },
      second: {
        mortality: 1
      },
      feeding: {
        response: 'holling-1',
        a: 1,
        e: 1
      }
    },
    start: {
      x: 74,
      y: 1
    },
    times: [0, 0.05, 1, 20, 40, 60, 73],
    states: [
      [74.0, 1.0],
      [49.799645884114256, 28.14154380779168],
      [1.7968876976635004e-19, 30.965756206846912],
      [1.142507654017368e-24, 1.734948285613694e-7],
      [5.543048530494838e-16, 3.575994943636233e-16],
      [2.689294223463478e-7, 7.370676914089403e-25],
      [0.11897797795124732, 1.8765082258682843e-30]
    ],
    events: [],
    tolerance: {
      state: null,
      logState: 1e-6,
      eventTime: null
    }
  },
  {
    id: 'S-TR-07',
    title: 'Quota above rK/4: prey reaches zero in finite time (closed form)',
    document: {
      interaction: 'consumer-resource',
      first: {
        growth: {
          kind: 'logistic',
          r: 1,
          K: 100
        },
        removal: {
          quota: 30
        }
      },
      second: {
        mortality: 0.3
      },
      feeding: {
        response: 'holling-1',
        a: 0.01,
        e: 0.1
      }
    },
    start: {
      x: 80,
      y: 0
    },
    times: [],
    states: [],
    events: [
      {
        species: 'first',
        level: 50,
        direction: 'down',
        t: 4.160311866527588
      },
      {
        species: 'first',
        level: 0,
        direction: 'down',
        t: 9.304439876433046
      }
    ],
    tolerance: {
      state: null,
      logState: null,
      eventTime: 1e-8
    }
  },
  {
    id: 'S-TR-08',
    title: 'Two uncoupled logistic species (closed form)',
    document: {
      interaction: 'competition',
      first: {
        growth: {
          kind: 'logistic',
          r: 0.9,
          K: 120
        }
      },
      second: {
        growth: {
          kind: 'logistic',
          r: 0.35,
          K: 60
        }
      },
      competition: {
        form: 'coefficients',
        alpha12: 0,
        alpha21: 0
      }
    },
    start: {
      x: 3,
      y: 90
    },
    times: [0, 1, 5, 10, 30],
    states: [
      [3.0, 90.0],
      [7.119035185829052, 78.4207144979879],
      [83.7257474815589, 63.68917291059017],
      [119.42520857784947, 60.610088695869976],
      [119.99999999120381, 60.00055073404208]
    ],
    events: [
      {
        species: 'first',
        level: 100,
        direction: 'up',
        t: 5.858888398404163
      },
      {
        species: 'second',
        level: 61,
        direction: 'down',
        t: 8.606461644300575
      }
    ],
    tolerance: {
      state: 1e-9,
      logState: null,
      eventTime: 1e-8
    }
  }
];

/** The attracting cycle of a type II consumer: fixed point of the return map, multiplier from the integral of the trace. */
export const limitCycleCase = {
  id: 'S-TR-04',
  title: 'Type II predator: limit cycle at K = 150',
  document: {
    interaction: 'consumer-resource',
    first: {
      growth: {
        kind: 'logistic',
        r: 1,
        K: 150
      }
    },
    second: {
      mortality: 0.5
    },
    feeding: {
      response: 'holling-2',
      a: 0.1,
      h: 0.5,
      e: 0.5
    }
  },
  period: 29.718428931884635,
  xMin: 0.021365649191367866,
  xMax: 146.31599196551807,
  yMin: 0.24130133551621658,
  yMax: 57.19641510992739,
  xMean: 64.42023885140657,
  yMean: 11.410634819812458,
  pointX: 125.82689434355719,
  pointY: 17.333333333333332,
  multiplier: 0.00016896806821965012,
  tolerance: {
    period: 1e-6,
    extremes: 1e-5,
    means: 1e-5,
    multiplier: 0.001
  }
} satisfies { document: ModelSpec } & Record<string, unknown>;
