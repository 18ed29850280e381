/** The main job from end to end, as the people who do it would: author, reviewer, outsider. */
import { readFile } from 'node:fs/promises';
import { expect, test, type Page } from '@playwright/test';
import Papa from 'papaparse';
import { at, ownOrigin, pageOf, signIn, visit } from './people';

interface Rate {
  path: string;
  value: string;
  unit?: string;
  sure: { kind: 'se' | 'cv' | 'range' | 'exact'; fields: Record<string, string> };
}
// Invented numbers; the point of rest follows by hand: x = (400 − 0.5·300)/(1 − 0.5·0.6) = 357.14, y = (300 − 0.6·400)/0.7 = 85.71.
const rates: Rate[] = [
  { path: 'first.growth.r', value: '0,8', sure: { kind: 'cv', fields: { CV: '10' } } },
  { path: 'first.growth.K', value: '400', sure: { kind: 'se', fields: { 'Standard error': '40' } } },
  {
    path: 'second.growth.r',
    value: '0.6',
    sure: { kind: 'range', fields: { 'Lower end': '0.45', 'Upper end': '0.8' } }
  },
  { path: 'second.growth.K', value: '300', sure: { kind: 'cv', fields: { CV: '8' } } },
  { path: 'competition.alpha12', value: '0.5', sure: { kind: 'cv', fields: { CV: '20' } } },
  { path: 'competition.alpha21', value: '0.6', sure: { kind: 'exact', fields: {} } }
];

async function stateTheQuestion(page: Page): Promise<string> {
  await page
    .getByRole('link', { name: /New study|State the first question/ })
    .first()
    .click();
  await expect(page.getByRole('heading', { name: 'New study' })).toBeVisible();
  await page.waitForLoadState('networkidle');
  await page.getByLabel('Name of the study').fill('Newts of Withy Pond');
  // Sent too early: every missing field is named, and the name that was typed is still there.
  await page.getByRole('button', { name: 'Create the study' }).click();
  await expect(page.getByText('Say where it is.').first()).toBeVisible();
  await expect(page.getByLabel('Name of the study')).toHaveValue('Newts of Withy Pond');
  await page
    .getByRole('textbox', { name: 'What it must decide' })
    .fill('Will the smooth newt persist for 20 years beside the alpine newt?');
  await page.getByLabel('Horizon', { exact: true }).fill('20');
  await page.getByLabel('Acceptable risk').fill('5');
  await page.getByLabel('Place').fill('Withy Pond');
  await page.getByLabel('Area', { exact: true }).fill('1,5');
  await page.getByRole('radio', { name: /They compete/ }).check();
  const [first, second] = [
    page.getByRole('group', { name: /First species/ }),
    page.getByRole('group', { name: /Second species/ })
  ];
  await first.getByLabel('Common name').fill('smooth newt');
  await first.getByLabel('What is counted').fill('adults in the water');
  await second.getByLabel('Common name').fill('alpine newt');
  await second.getByLabel('What is counted').fill('adults in the water');
  await page.getByRole('button', { name: 'Create the study' }).click();
  await expect(page).toHaveURL(/\/studies\/[0-9a-f-]{36}\/rates/);
  return /\/studies\/([0-9a-f-]{36})/.exec(page.url())?.[1] ?? '';
}

async function enterRate(page: Page, studyId: string, rate: Rate): Promise<void> {
  await visit(page, `/studies/${studyId}/rates?edit=${rate.path}`);
  const form = page.locator('form[action="?/save"]');
  await form.getByLabel('Value', { exact: true }).fill(rate.value);
  await form.getByLabel('How sure').selectOption(rate.sure.kind);
  for (const [label, value] of Object.entries(rate.sure.fields))
    await form.getByLabel(label, { exact: true }).fill(value);
  await form.getByLabel('Kind of source').selectOption('own survey');
  await form.getByLabel('Source', { exact: true }).fill('Torch counts, April 2019 to 2025');
  await form.getByRole('button', { name: /^Save/ }).click();
  await expect(page.locator(`tr[id="rate-${rate.path}"]`)).toContainText('Torch counts');
}

test('from a question to a reviewed study', async ({ page, browser }) => {
  await signIn(page, at('ecologist'));
  const studyId = await stateTheQuestion(page);

  for (const rate of rates) await enterRate(page, studyId, rate);
  await expect(page.locator('tr[id="rate-first.growth.r"]')).toContainText('doubles in');

  await page.getByRole('link', { name: /^Model/ }).click();
  await expect(page.locator('.verdict')).toContainText('compete');
  await expect(page.locator('.katex').first()).toBeVisible();

  await page.getByRole('link', { name: /^Equilibria/ }).click();
  await expect(page.locator('.verdict').first()).toContainText('settle together');
  const points = page.getByRole('table', { name: /rest/i }).first();
  await expect(points).toContainText('357');
  await expect(points).toContainText('86 ± ');
  await expect(points).toContainText('stable node');
  await expect(points).toContainText('saddle');

  await page.getByRole('link', { name: /^Trajectories/ }).click();
  await page.waitForLoadState('networkidle');
  await page.locator('#start-0-x').fill('120');
  await page.locator('#start-0-y').fill('many');
  await page.getByRole('button', { name: 'Save the starts' }).click();
  await expect(page.getByText('“many” is not a number.').first()).toBeVisible();
  await expect(page.locator('#start-0-x')).toHaveValue('120');
  await page.locator('#start-0-y').fill('40');
  await page.getByRole('button', { name: 'Save the starts' }).click();
  await expect(page.getByRole('heading', { name: 'How it was computed' })).toBeVisible();

  const downloading = page.waitForEvent('download');
  await page.getByRole('link', { name: 'Download the runs as CSV' }).click();
  const download = await downloading;
  expect(download.suggestedFilename()).toMatch(/^newts-of-withy-pond-v\d+-trajectories-\d{4}-\d{2}-\d{2}\.csv$/);
  const text = await readFile(await download.path(), 'utf8');
  expect(text).toContain('\r\n');
  const parsed = Papa.parse<Record<string, string>>(text, { header: true, skipEmptyLines: true });
  expect(parsed.errors).toEqual([]);
  const end = parsed.data.at(-1) ?? {};
  expect(Number(end['time'])).toBe(20);
  expect(Number(parsed.data[0]?.['smooth newt'])).toBe(120);
  expect(Number(end['smooth newt'])).toBeGreaterThan(300);

  // An outsider invited by e-mail becomes the reviewer of this study and of nothing else.
  await visit(page, `/studies/${studyId}/sharing`);
  const email = `outside-reviewer-${Date.now()}@elsewhere.example`;
  await page.getByLabel('E-mail address').fill(email);
  await page.getByRole('button', { name: 'Send the invitation' }).click();
  await expect(page.getByText(`An invitation is on its way to ${email}.`)).toBeVisible();

  const administrator = await pageOf(browser, at('administrator'));
  await visit(administrator, '/settings/mail');
  const message = administrator.locator('article', { hasText: email }).first();
  await expect(message).toContainText('Newts of Withy Pond');
  const invitation = await message.getByRole('link', { name: /\/invitations\// }).getAttribute('href');
  const outside = await (await browser.newContext()).newPage();
  await visit(outside, invitation ?? '');
  await outside.getByLabel('Name', { exact: false }).first().fill('Outside reviewer');
  await outside
    .getByLabel(/^(New )?[Pp]assword/)
    .first()
    .fill('a-long-reed-by-the-water');
  await outside.getByRole('button', { name: /Accept|Join|Create/ }).click();
  await expect(outside).toHaveURL(/\/studies/);

  await visit(outside, `/studies/${studyId}/rates`);
  await expect(outside.getByRole('link', { name: /^(Enter|Change)/ })).toHaveCount(0);
  await outside.locator('summary', { hasText: 'Comment' }).click();
  await outside.getByLabel('About').selectOption('rate:competition.alpha12');
  await outside.getByLabel('Comment', { exact: true }).fill('Which trial gives this coefficient?');
  await outside.getByRole('button', { name: 'Comment', exact: true }).click();
  await expect(outside.getByText('Which trial gives this coefficient?')).toBeVisible();

  // Refused by page and by API, and nothing has changed.
  const before = await (await outside.request.get(`/api/v1/studies/${studyId}`)).json();
  const refused = await outside.request.patch(`/api/v1/studies/${studyId}/rates`, {
    headers: ownOrigin(outside),
    data: {
      revision: before.revision.number,
      rate: {
        path: 'competition.alpha12',
        value: 5,
        unit: '1',
        form: 'plain',
        uncertainty: { kind: 'exact' },
        source: { kind: 'judgement', text: 'no right to say so' },
        note: '',
        overrideReason: ''
      }
    }
  });
  expect(refused.status()).toBe(403);
  expect(await (await outside.request.get(`/api/v1/studies/${studyId}`)).json()).toEqual(before);

  // Somebody from another workspace does not learn that the study exists.
  const stranger = await (await browser.newContext()).newPage();
  expect((await stranger.request.get(`/api/v1/studies/${studyId}`)).status()).toBe(401);
  const reviewer = await pageOf(browser, at('reviewer'));
  expect((await reviewer.goto(`/studies/${studyId}`))?.status()).toBe(404);
  expect((await reviewer.request.get(`/api/v1/studies/${studyId}`)).status()).toBe(404);

  // The author reads the question and answers it.
  await visit(page, `/studies/${studyId}/review`);
  await expect(page.getByText('Which trial gives this coefficient?')).toBeVisible();
  await page.getByLabel('Answer').first().fill('The tank trial of 2021.');
  await page.getByRole('button', { name: 'Answer' }).first().click();
  await expect(page.getByText('The tank trial of 2021.')).toBeVisible();
});
