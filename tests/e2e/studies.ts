/** Studies for the browser tests, made by the requests that the pages themselves send. Every page passed is signed in. */
import { expect, type Page } from '@playwright/test';
import { asForm, ownOrigin } from './people';

/** The question as its form posts it. */
export const question = {
  revision: '0',
  title: 'Newts of Withy Pond',
  objective: 'Will the smooth newt persist for 20 years beside the alpine newt?',
  horizon: '20',
  timeUnit: 'a',
  acceptableRisk: '5',
  place: 'Withy Pond',
  areaValue: '1.5',
  areaUnit: 'har',
  interaction: 'competition',
  firstCommon: 'smooth newt',
  firstScientific: '',
  firstCounted: 'adults',
  firstUnit: '{ind}/har',
  secondCommon: 'alpine newt',
  secondScientific: '',
  secondCounted: 'adults',
  secondUnit: '{ind}/har',
  protects: 'first'
};

/** Two competitors that settle together at 357.14 and 85.71: (400 − 0.5·300)/(1 − 0.5·0.6) and (300 − 0.6·400)/0.7. */
export const rates = [
  { path: 'first.growth.r', value: 0.8, unit: '/a' },
  { path: 'first.growth.K', value: 400, unit: '{ind}/har' },
  { path: 'second.growth.r', value: 0.6, unit: '/a' },
  { path: 'second.growth.K', value: 300, unit: '{ind}/har' },
  { path: 'competition.alpha12', value: 0.5, unit: '1' },
  { path: 'competition.alpha21', value: 0.6, unit: '1' }
];

/** A rate as the API takes it. */
export const entry = (rate: { path: string; value: unknown; unit: string }) => ({
  form: 'plain',
  uncertainty: { kind: 'cv', percent: 10 },
  source: { kind: 'own survey', text: 'Torch counts, April 2019 to 2025' },
  note: '',
  overrideReason: '',
  ...rate
});

/** Posts a form of the product and expects to be sent on. @returns where to */
export async function post(page: Page, address: string, form: Record<string, string>): Promise<string> {
  const answer = await page.request.post(address, { form, headers: asForm(page), maxRedirects: 0 });
  expect([address, answer.status()]).toEqual([address, 303]);
  return answer.headers()['location'] ?? '';
}

/** Saves one rate through the API on top of a revision. @returns the new revision */
export async function saveRate(page: Page, id: string, revision: number, rate: Record<string, unknown>) {
  const answer = await page.request.patch(`/api/v1/studies/${id}/rates`, {
    headers: ownOrigin(page),
    data: { revision, rate }
  });
  expect(answer.status(), await answer.text()).toBe(200);
  return ((await answer.json()) as { revision: number }).revision;
}

/** The number of a study's latest revision. */
export async function revisionOf(page: Page, id: string): Promise<number> {
  const study = (await (await page.request.get(`/api/v1/studies/${id}`)).json()) as { revision: { number: number } };
  return study.revision.number;
}

/** A new study of the signed-in person: its question only, or whole with rates and one start. @returns its id */
export async function createStudy(page: Page, title: string, extent: 'question' | 'whole' = 'question') {
  const where = await post(page, '/studies/new', { ...question, title });
  const id = /\/studies\/([0-9a-f-]{36})/.exec(where)?.[1] ?? '';
  expect(id).not.toBe('');
  if (extent === 'question') return id;
  let revision = 1;
  for (const rate of rates) revision = await saveRate(page, id, revision, entry(rate));
  await post(page, `/studies/${id}/trajectories?/starts`, {
    revision: String(revision),
    label: 'Spring 2025',
    x: '120',
    y: '40',
    seX: '12',
    seY: '',
    source: 'Torch counts'
  });
  return id;
}
