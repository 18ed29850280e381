import { EquilibriaRequest } from '$lib/contracts/trajectory';
import { asEndpoint } from '$lib/server/kit/asEndpoint';
import { readJson } from '$lib/server/kit/readJson';
import { computeEquilibria } from '$lib/server/numerics/equilibria';

export const POST = asEndpoint(async (event) => computeEquilibria(await readJson(event, EquilibriaRequest)));
