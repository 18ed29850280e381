/** The core of the job with the keyboard alone; where the focus is can be seen at every stop. */
import { expect, test, type Locator, type Page } from '@playwright/test';
import { at, PASSWORD, signIn, visit } from './people';
import { createStudy } from './studies';

/** Whether the focused control, or what frames it, looks different for being focused. */
async function expectVisibleFocus(page: Page) {
  const shows = await page.evaluate(() => {
    const focused = document.activeElement as HTMLElement;
    const frames = [focused, focused.parentElement, focused.parentElement?.parentElement].filter((e) => e != null);
    const look = () =>
      frames
        .map((element) => {
          const s = getComputedStyle(element);
          return [s.outlineStyle, s.outlineWidth, s.outlineColor, s.boxShadow, s.borderColor, s.clipPath].join();
        })
        .join();
    const withFocus = look();
    focused.blur();
    const without = look();
    focused.focus();
    return withFocus !== without;
  });
  expect(shows, `focus on ${await page.evaluate(() => document.activeElement?.outerHTML.slice(0, 120))}`).toBe(true);
}

/** Presses Tab until the control has the focus, looking at the focus on arrival. */
async function tabTo(page: Page, control: Locator, most = 80) {
  await expect(control).toBeVisible();
  for (let pressed = 0; pressed < most; pressed += 1) {
    await page.keyboard.press('Tab');
    if (await control.evaluate((element) => element === document.activeElement)) {
      await expectVisibleFocus(page);
      return;
    }
  }
  throw new Error(`Not reached within ${most} tabs: ${control.toString()}`);
}

async function type(page: Page, text: string) {
  await page.keyboard.press('ControlOrMeta+A');
  await page.keyboard.type(text);
}

test('signs in, finds a study, changes a rate, reads the plane', async ({ page, browser }) => {
  const title = `Newts by hand ${Date.now()}`;
  const maker = await browser.newPage();
  await signIn(maker, at('ecologist'));
  const id = await createStudy(maker, title, 'whole');
  await maker.close();

  await visit(page, '/sign-in');
  await tabTo(page, page.getByLabel('Work email'));
  await page.keyboard.type(at('ecologist'));
  await tabTo(page, page.getByLabel('Password', { exact: true }), 1);
  await page.keyboard.type(PASSWORD);
  await page.keyboard.press('Enter');
  await expect(page).toHaveURL(/\/studies/);
  await page.waitForLoadState('networkidle');

  await tabTo(page, page.getByRole('searchbox'));
  await page.keyboard.type(title);
  await expect(page).toHaveURL(/q=Newts/);
  await expect(page.locator('main h2')).toHaveCount(1);
  await tabTo(page, page.getByRole('link', { name: title }));
  await page.keyboard.press('Enter');
  await expect(page).toHaveURL(new RegExp(id));

  // The rail: one line, walked with the arrows.
  const rail = page.getByRole('navigation', { name: 'Evidence' });
  const station = (name: string) => rail.getByRole('link', { name: new RegExp(`^${name}`) });
  await tabTo(page, station('Surveys'));
  await page.keyboard.press('End');
  await expect(station('Report')).toBeFocused();
  await page.keyboard.press('Home');
  await page.keyboard.press('ArrowDown');
  await expect(station('Rates')).toBeFocused();
  await expectVisibleFocus(page);
  await page.keyboard.press('Enter');
  await expect(page.getByRole('heading', { name: 'Rates', level: 1 })).toBeVisible();

  await tabTo(page, page.locator('a[href*="edit=first.growth.r#"]'));
  await page.keyboard.press('Enter');
  const form = page.locator('form[action="?/save"]');
  await tabTo(page, form.getByLabel('Value', { exact: true }));
  await type(page, '0.9');
  await page.keyboard.press('Enter');
  await expect(form).toHaveCount(0);
  await expect(page.locator('tr[id="rate-first.growth.r"]')).toContainText('0.90');

  await tabTo(page, station('Equilibria'));
  await page.keyboard.press('Enter');
  const plane = page.getByRole('application').first();
  await tabTo(page, plane);
  const said = page.locator('.frame [aria-live="polite"]').first();
  await page.keyboard.press('ArrowRight');
  await expect(said).not.toBeEmpty();
  const first = await said.innerText();
  await page.keyboard.press('ArrowRight');
  await expect(said).not.toHaveText(first);
  await page.keyboard.press('Home');
  await expect(said).toHaveText(first);
  await page.keyboard.press('Escape');
  await expect(plane).not.toBeFocused();

  // A comment on a point, from the first key to the last.
  await tabTo(page, page.locator('summary', { hasText: 'Comment' }));
  await page.keyboard.press('Enter');
  await tabTo(page, page.getByLabel('Comment', { exact: true }), 6);
  await page.keyboard.type('Walked here by keyboard.');
  await tabTo(page, page.getByRole('button', { name: 'Comment', exact: true }), 2);
  await page.keyboard.press('Enter');
  await expect(page.getByText('Walked here by keyboard.')).toBeVisible();
});

test('skips to the evidence, opens and leaves a menu, turns the theme', async ({ page }) => {
  await signIn(page, at('administrator'));
  await visit(page, '/studies');
  await page.keyboard.press('Tab');
  const skip = page.locator('a.skip');
  await expect(skip).toBeFocused();
  await expect(skip).toBeInViewport();
  await page.keyboard.press('Enter');
  await page.keyboard.press('Tab');
  expect(await page.evaluate(() => document.activeElement?.closest('#main') !== null)).toBe(true);

  await visit(page, '/studies');
  const summary = page.locator('.bar summary');
  await tabTo(page, summary);
  await page.keyboard.press('Enter');
  await page.keyboard.press('ArrowDown');
  await expect(page.locator('.bar .menu-list a').first()).toBeFocused();
  await page.keyboard.press('ArrowUp');
  await expect(page.locator('.bar .menu-list button').last()).toBeFocused();
  await page.keyboard.press('Escape');
  await expect(summary).toBeFocused();
  await expect(page.locator('.bar .menu-list a').first()).toBeHidden();

  await page.reload();
  const toggle = page.locator('.bar form.theme button');
  await tabTo(page, toggle);
  const before = await page.locator('html').getAttribute('data-theme');
  await page.keyboard.press('Enter');
  await expect(page.locator('html')).not.toHaveAttribute('data-theme', before ?? '');
});

test('every control of a study’s pages is reached by Tab, in the order of the page, and left again', async ({
  page
}) => {
  await signIn(page, at('ecologist'));
  const id = await createStudy(page, 'Newts tab by tab', 'whole');
  for (const part of ['rates?edit=first.growth.K', 'model', 'trajectories', 'sharing']) {
    await visit(page, `/studies/${id}/${part}`);
    const controls = await page.evaluate(
      () =>
        [
          ...document.querySelectorAll<HTMLElement>('main :is(a[href], button, input, select, textarea, summary)')
        ].filter(
          (e) =>
            e.checkVisibility() &&
            !e.matches(':disabled, [type="hidden"]') &&
            !(e instanceof HTMLInputElement && e.type === 'radio' && !e.checked)
        ).length
    );
    const reached = new Set<string>();
    for (let i = 0; i < controls + 60; i += 1) {
      await page.keyboard.press('Tab');
      const where = await page.evaluate(() => {
        const e = document.activeElement as HTMLElement;
        if (e === document.body) return 'end';
        if (!e.closest('main') || !e.matches('a, button, input, select, textarea, summary')) return null;
        e.dataset.reached ??= String(Math.random());
        return e.dataset.reached;
      });
      if (where === 'end') break;
      if (where) reached.add(where);
    }
    expect([part, reached.size]).toEqual([part, controls]);
  }
});
