import { z } from 'zod';
import {
  CommentAnswer,
  EquilibriaAnswer,
  SavedAnswer,
  StudyAnswer,
  StudyListAnswer,
  StudyPathsAnswer,
  TrajectoryAnswer
} from '$lib/contracts/answers';
import { NewThread } from '$lib/contracts/comment';
import { Problem } from '$lib/contracts/problem';
import { RatePatch } from '$lib/contracts/rateChange';
import { StudyListQuery } from '$lib/contracts/study';
import { ThresholdsAnswer, ThresholdsRequest } from '$lib/contracts/thresholds';
import { EquilibriaRequest, TrajectoryRequest } from '$lib/contracts/trajectory';
import { ENGINE_VERSION } from '$lib/dynamics';

type Json = Record<string, unknown>;

/** Every shape of the API by name. What comes in is described as it may be sent, what goes out as it is written. */
export const openApiSchemas = {
  EquilibriaRequest,
  EquilibriaAnswer,
  TrajectoryRequest,
  TrajectoryAnswer,
  ThresholdsRequest,
  ThresholdsAnswer,
  StudyListAnswer,
  StudyAnswer,
  StudyPathsAnswer,
  RatePatch,
  SavedAnswer,
  NewThread,
  CommentAnswer,
  Problem
} as const;
type SchemaName = keyof typeof openApiSchemas;

const incoming: readonly SchemaName[] = [
  'EquilibriaRequest',
  'TrajectoryRequest',
  'ThresholdsRequest',
  'RatePatch',
  'NewThread'
];

function schemaOf(name: SchemaName): Json {
  const { $schema: _dialect, ...schema } = z.toJSONSchema(openApiSchemas[name], {
    io: incoming.includes(name) ? 'input' : 'output',
    unrepresentable: 'any'
  }) as Json;
  return schema;
}

const ref = (name: SchemaName): Json => ({ $ref: `#/components/schemas/${name}` });
const json = (name: SchemaName): Json => ({ 'application/json': { schema: ref(name) } });
const csv: Json = { 'text/csv': { schema: { type: 'string', description: 'RFC 4180, CRLF, one header row.' } } };

const REFUSALS: Record<number, string> = {
  401: 'Neither a session nor a good token.',
  403: 'Readable, but not allowed; or a token that may only read; or a request from another site.',
  404: 'There is none, or it is not yours to see.',
  409: 'Archived, or somebody saved in between: `errors` lists what they changed.',
  422: 'Something in it cannot be used, each field named in `errors` by its JSON pointer; or a number that cannot be reached to the accuracy asked for (`engine.failed`, `engine.tooLong`). Also a body that is not JSON (`NaN`, `Infinity`) or is larger than 1 MB.',
  429: 'Too many requests; Retry-After says how long to wait.',
  503: 'The records cannot be reached at the moment; try again.'
};

function responses(status: number, description: string, content: Json, refused: readonly number[]): Json {
  const entries: [string, Json][] = [[String(status), { description, content }]];
  for (const code of [...refused, 429, 503].sort((a, b) => a - b)) {
    entries.push([
      String(code),
      {
        description: REFUSALS[code] ?? '',
        content: { 'application/problem+json': { schema: ref('Problem') } }
      }
    ]);
  }
  return Object.fromEntries(entries);
}

const body = (name: SchemaName): Json => ({ required: true, content: json(name) });
const query = (name: string, description: string, schema: Json): Json => ({ name, in: 'query', description, schema });
const units = query('units', 'For CSV: units beside the names in the header, in a row of their own, or left out.', {
  type: 'string',
  enum: ['none', 'header', 'row'],
  default: 'none'
});
const studyId: Json = { name: 'studyId', in: 'path', required: true, schema: { type: 'string', format: 'uuid' } };

const listed = z.toJSONSchema(StudyListQuery, { io: 'output', unrepresentable: 'any' }) as {
  properties: Record<string, Json>;
};
const listWords: Record<string, string> = {
  q: 'Words that must all occur in title, place, species or verdict.',
  state: 'Open, archived or all; anything else counts as open.',
  kind: 'How the two species meet; anything else counts as any.',
  sort: 'By last change, title, place or creation.',
  page: 'From 1; 25 studies a page.'
};

/** The whole description, OpenAPI 3.1. Made from the schemas that the endpoints themselves use. */
export function openApiDocument(): Json {
  const names = Object.keys(openApiSchemas) as SchemaName[];
  return {
    openapi: '3.1.0',
    info: {
      title: 'Sedgeline',
      version: '1.0.0',
      summary: 'Two-species population studies: models in, equilibria and trajectories out.',
      description: `Engine ${ENGINE_VERSION}. Every rate is per study time unit and every abundance in the study's abundance unit: the model document carries no units. Nothing is guessed: an unknown or missing field is refused by its path, and a number that cannot be reached to tolerance is an error that says so.`
    },
    servers: [{ url: '/' }],
    security: [{ bearer: [] }, { session: [] }],
    paths: {
      '/api/v1/equilibria': {
        post: {
          operationId: 'findEquilibria',
          summary: 'Every equilibrium of a model, classified',
          requestBody: body('EquilibriaRequest'),
          responses: responses(200, 'The equilibria.', json('EquilibriaAnswer'), [401, 403, 422])
        }
      },
      '/api/v1/trajectories': {
        post: {
          operationId: 'followTrajectory',
          summary: 'The path of a model from a start, as JSON or, by `Accept: text/csv`, as a table',
          parameters: [units],
          requestBody: body('TrajectoryRequest'),
          responses: responses(200, 'The path.', { ...json('TrajectoryAnswer'), ...csv }, [401, 403, 422])
        }
      },
      '/api/v1/thresholds': {
        post: {
          operationId: 'findThresholds',
          summary: 'Branches of equilibria over one parameter, and the values at which they change',
          requestBody: body('ThresholdsRequest'),
          responses: responses(200, 'The branches and thresholds.', json('ThresholdsAnswer'), [401, 403, 422])
        }
      },
      '/api/v1/studies': {
        get: {
          operationId: 'listStudies',
          summary: 'The studies you may read',
          parameters: Object.entries(listed.properties).map(([name, schema]) =>
            query(name, listWords[name] ?? '', schema)
          ),
          responses: responses(200, 'A page of studies.', json('StudyListAnswer'), [401])
        }
      },
      '/api/v1/studies/{studyId}': {
        get: {
          operationId: 'readStudy',
          summary: 'One study: its question and content, its verdict, what you may do',
          parameters: [studyId],
          responses: responses(200, 'The study.', json('StudyAnswer'), [401, 404])
        }
      },
      '/api/v1/studies/{studyId}/rates': {
        patch: {
          operationId: 'saveRate',
          summary: 'Save one rate as a new revision',
          parameters: [studyId],
          requestBody: body('RatePatch'),
          responses: responses(200, 'What was saved.', json('SavedAnswer'), [401, 403, 404, 409, 422])
        }
      },
      '/api/v1/studies/{studyId}/equilibria': {
        get: {
          operationId: 'studyEquilibria',
          summary: 'The equilibria of the study’s own model',
          parameters: [studyId],
          responses: responses(200, 'The equilibria.', json('EquilibriaAnswer'), [401, 404, 422])
        }
      },
      '/api/v1/studies/{studyId}/trajectories': {
        get: {
          operationId: 'studyTrajectories',
          summary: 'The paths from the study’s starts, as JSON or, by `Accept: text/csv`, as one table',
          parameters: [studyId, units],
          responses: responses(200, 'The paths.', { ...json('StudyPathsAnswer'), ...csv }, [401, 404, 422])
        }
      },
      '/api/v1/studies/{studyId}/trajectories.csv': {
        get: {
          operationId: 'studyTrajectoriesCsv',
          summary: 'The same table, at an address to download it from',
          parameters: [studyId, units],
          responses: responses(200, 'The table.', csv, [401, 404, 422])
        }
      },
      '/api/v1/studies/{studyId}/comments': {
        post: {
          operationId: 'openThread',
          summary: 'Comment on a rate, a point, a part or the study',
          parameters: [studyId],
          requestBody: body('NewThread'),
          responses: responses(201, 'The thread that was opened.', json('CommentAnswer'), [401, 403, 404, 409, 422])
        }
      },
      '/api/v1/openapi.json': {
        get: {
          operationId: 'describe',
          summary: 'This description',
          security: [],
          responses: {
            200: { description: 'OpenAPI 3.1.', content: { 'application/json': { schema: { type: 'object' } } } }
          }
        }
      }
    },
    components: {
      schemas: Object.fromEntries(names.map((name) => [name, schemaOf(name)])),
      securitySchemes: {
        bearer: { type: 'http', scheme: 'bearer' },
        session: {
          type: 'apiKey',
          in: 'cookie',
          name: 'sedgeline_session',
          description: 'The browser’s own sign-in. Anything but reading must come from the same origin.'
        }
      }
    }
  };
}
