/** Trying a value before it is saved; and the same work in a browser that runs no script. */
import { expect, test } from '@playwright/test';
import { at, signIn, visit } from './people';
import { createStudy, question, revisionOf } from './studies';

test('a slider previews, says so, can be put back and can be saved', async ({ page }) => {
  await signIn(page, at('ecologist'));
  const id = await createStudy(page, 'Newts on a slider', 'whole');
  await visit(page, `/studies/${id}/equilibria`);

  const line = page.locator('.plane .line.first').first();
  const verdict = page.locator('.verdict').first();
  const note = page.getByText('This is a preview, not the study.');
  const asSaved = { path: await line.getAttribute('d'), verdict: await verdict.innerText() };
  await expect(note).toHaveCount(0);

  await page.getByLabel('Rate', { exact: true }).selectOption('first.growth.K');
  const slider = page.getByRole('slider', { name: 'Value, slider' });
  await slider.fill('140');
  await expect(note).toBeVisible();
  await expect(page.getByText('is 400 ind/ha as saved.')).toBeVisible();
  await expect(line).not.toHaveAttribute('d', asSaved.path ?? '');
  // 140 of the first is fewer than the second takes the room of: it is lost.
  await expect(verdict).toContainText('exclude');

  await page.getByRole('button', { name: 'Put back' }).click();
  await expect(note).toHaveCount(0);
  await expect(line).toHaveAttribute('d', asSaved.path ?? '');
  await expect(verdict).toHaveText(asSaved.verdict);

  // The number beside the slider does the same; nothing has reached the server until it is saved.
  const before = await revisionOf(page, id);
  await page.getByRole('textbox', { name: 'Value', exact: true }).fill('500');
  await expect(note).toBeVisible();
  expect(await revisionOf(page, id)).toBe(before);
  await page.getByRole('button', { name: /^Save this value/ }).click();
  await expect(note).toHaveCount(0);
  expect(await revisionOf(page, id)).toBe(before + 1);
  await visit(page, `/studies/${id}/rates`);
  const row = page.locator('tr[id="rate-first.growth.K"]');
  await expect(row).toContainText('500');
  await expect(row).toContainText('Torch counts');
});

test.describe('without script', () => {
  test.use({ javaScriptEnabled: false });

  test('one can sign in, create a study, save rates and read the points', async ({ page }) => {
    await page.goto('/sign-in');
    await page.getByLabel('Work email').fill(at('ecologist'));
    await page.getByLabel('Password', { exact: true }).fill('reed-and-water-2026');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await expect(page).toHaveURL(/\/studies/);

    await page.goto('/studies/new');
    await page.getByLabel('Name of the study').fill('Newts by candlelight');
    await page.getByRole('button', { name: 'Create the study' }).click();
    await expect(page.getByText('Say where it is.').first()).toBeVisible();
    await expect(page.getByLabel('Name of the study')).toHaveValue('Newts by candlelight');
    for (const [name, value] of Object.entries(question)) {
      const field = page.locator(`input[name="${name}"]:not([type="hidden"]), textarea[name="${name}"]`);
      if (name === 'interaction' || name === 'protects')
        await page.locator(`[name="${name}"][value="${value}"]`).check();
      else if ((await field.count()) === 1) await field.fill(value);
    }
    await page.getByRole('button', { name: 'Create the study' }).click();
    await expect(page).toHaveURL(/\/studies\/[0-9a-f-]{36}\/rates/);
    const id = /\/studies\/([0-9a-f-]{36})/.exec(page.url())?.[1] ?? '';

    // Each save opens the next rate that is missing.
    for (const [path, value] of [
      ['first.growth.r', '0.8'],
      ['first.growth.K', '400'],
      ['second.growth.r', '0.6'],
      ['second.growth.K', '300'],
      ['competition.alpha12', '0.5'],
      ['competition.alpha21', '0.6']
    ] as const) {
      await page.goto(`/studies/${id}/rates?edit=${path}`);
      const form = page.locator('form[action="?/save"]');
      await form.getByLabel('Value', { exact: true }).fill(value);
      await form.getByLabel('Standard error', { exact: true }).fill('0.1');
      await form.getByLabel('Kind of source').selectOption('own survey');
      await form.getByLabel('Source', { exact: true }).fill('Torch counts');
      await form.getByRole('button', { name: /^Save/ }).click();
      await expect(page.locator(`tr[id="rate-${path}"]`)).toContainText('Torch counts');
    }

    await page.goto(`/studies/${id}/equilibria`);
    await expect(page.locator('.verdict').first()).toContainText('settle together');
    const points = page.getByRole('table', { name: 'Where the populations can rest' }).first();
    await expect(points).toContainText('357');
    await expect(points).toContainText('stable node');
    await expect(page.locator('.plane svg').first()).toBeVisible();

    // The menu and the theme are plain forms and disclosures.
    await page.getByRole('button', { name: 'Dark theme' }).click();
    await expect(page.locator('html')).toHaveAttribute('data-theme', 'dark');
    await page.locator('.bar summary').click();
    await page.getByRole('button', { name: 'Sign out' }).click();
    await page.goto('/studies');
    await expect(page).toHaveURL(/\/sign-in/);
  });
});
