/** The database goes away and comes back while somebody works. Runs alone, after every other test. */
import { readFileSync } from 'node:fs';
import { expect, test } from '@playwright/test';
import { at, ownOrigin, signIn, visit } from './people';
import { createStudy, entry, rates, revisionOf } from './studies';

const { controlUrl } = JSON.parse(readFileSync('.sedgeline/e2e.json', 'utf8')) as { controlUrl: string };

test('a database that is away is said plainly, and found again without anybody’s help', async ({ page, request }) => {
  await signIn(page, at('ecologist'));
  const id = await createStudy(page, 'Newts in a power cut', 'whole');
  await visit(page, `/studies/${id}/rates?edit=first.growth.r`);
  const form = page.locator('form[action="?/save"]');
  await form.getByLabel('Value', { exact: true }).fill('0.71');

  const control = async (act: 'stop' | 'start') => {
    expect((await request.post(`${controlUrl}/database/${act}`, { timeout: 60_000 })).status()).toBe(204);
  };
  await control('stop');
  try {
    // A save is refused, and the page with what was typed stays.
    const refused = page.waitForResponse((response) => response.request().method() === 'POST');
    await form.getByRole('button', { name: /^Save/ }).click();
    expect((await refused).status()).toBe(503);
    const notice = page.getByText('The records cannot be reached at the moment.');
    await expect(notice).toBeVisible();
    await expect(form.getByLabel('Value', { exact: true })).toHaveValue('0.71');

    const other = await page.context().newPage();
    const answer = await other.goto(`/studies/${id}`);
    expect(answer?.status()).toBe(503);
    expect(answer?.headers()['retry-after']).toBeTruthy();
    await expect(other.getByRole('heading', { name: 'The records cannot be reached at the moment.' })).toBeVisible();
    await expect(other.locator('body')).not.toContainText(/sequelize|ECONNREFUSED|postgres|at \//i);

    const origin = ownOrigin(page);
    const asked = await page.request.get(`/api/v1/studies/${id}`);
    expect(asked.status()).toBe(503);
    expect(asked.headers()['content-type']).toContain('application/problem+json');
    expect(await asked.json()).toMatchObject({ status: 503, code: 'database.unavailable' });
    const sent = await page.request.patch(`/api/v1/studies/${id}/rates`, {
      headers: origin,
      data: { revision: 8, rate: entry({ ...rates[0], path: 'first.growth.r', value: 0.72, unit: '/a' }) }
    });
    expect(sent.status()).toBe(503);

    expect((await page.request.get('/health/live')).status()).toBe(200);
    expect((await page.request.get('/health/ready')).status()).toBe(503);
  } finally {
    await control('start');
  }

  await expect.poll(async () => (await page.request.get('/health/ready')).status(), { timeout: 60_000 }).toBe(200);
  expect(await revisionOf(page, id)).toBe(8);
  // The person is still signed in, and what was typed before is saved now, from the same page.
  await form.getByRole('button', { name: /^Save/ }).click();
  await expect(page.locator('tr[id="rate-first.growth.r"]')).toContainText('0.71');
  await expect(page.getByText('The records cannot be reached at the moment.')).toBeHidden();
});
