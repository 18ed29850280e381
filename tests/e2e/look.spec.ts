/** Light, dark and paper. */
import { expect, test, type Page } from '@playwright/test';
import { at, signIn, visit } from './people';
import { createStudy } from './studies';

/** Of the page's ground: 0 is black, 1 white. */
const lightness = (page: Page) =>
  page.evaluate(() => {
    const canvas = document.createElement('canvas').getContext('2d');
    if (!canvas) return -1;
    canvas.fillStyle = getComputedStyle(document.body).backgroundColor;
    canvas.fillRect(0, 0, 1, 1);
    return (canvas.getImageData(0, 0, 1, 1).data[1] ?? -1) / 255;
  });

test('a chosen theme is there with the first answer, and follows the person', async ({ page }) => {
  await visit(page, '/sign-in');
  await page.getByRole('group', { name: 'Theme' }).getByRole('button', { name: 'Dark' }).click();
  await expect(page.locator('html')).toHaveAttribute('data-theme', 'dark');
  const text = await (await page.request.get('/sign-in')).text();
  expect(text).toContain('data-theme="dark"');
  await signIn(page, at('observer'));
  await expect(page.locator('html')).toHaveAttribute('data-theme', 'dark');
  expect(await lightness(page)).toBeLessThan(0.3);
  await page.getByRole('button', { name: 'Light theme' }).click();
  await expect.poll(() => lightness(page)).toBeGreaterThan(0.8);
});

test('without a choice the system’s theme is taken', async ({ browser }) => {
  const page = await browser.newPage({ colorScheme: 'dark' });
  await visit(page, '/sign-in');
  await expect(page.locator('html')).toHaveAttribute('data-theme', 'system');
  expect(await lightness(page)).toBeLessThan(0.3);
  await page.emulateMedia({ colorScheme: 'light' });
  await expect.poll(() => lightness(page)).toBeGreaterThan(0.8);
  await page.close();
});

test('a printed study has its findings and none of its buttons', async ({ page }) => {
  await signIn(page, at('ecologist'));
  const id = await createStudy(page, 'Newts on paper', 'whole');
  await page.context().addCookies([{ name: 'theme', value: 'dark', url: new URL(page.url()).origin }]);
  for (const part of ['equilibria', 'trajectories']) {
    await visit(page, `/studies/${id}/${part}`);
    await page.emulateMedia({ media: 'print' });
    await expect(page.locator('.verdict').first()).toBeVisible();
    await expect(page.locator('table').first()).toBeVisible();
    for (const hidden of ['.bar summary', '.theme button', 'details.new-thread']) {
      await expect(page.locator(hidden).first()).toBeHidden();
    }
    // Ink on white, whatever the screen was.
    const ink = await page
      .locator('.verdict')
      .first()
      .evaluate((e) => getComputedStyle(e).color);
    expect(Math.max(...(ink.match(/[\d.]+/g) ?? []).slice(0, 3).map(Number))).toBeLessThan(110);
    const sheet = await page.pdf({ format: 'A4' });
    expect(sheet.byteLength).toBeGreaterThan(10_000);
    await page.emulateMedia({ media: 'screen' });
  }
});
