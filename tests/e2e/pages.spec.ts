/**
 * Every page as everybody meets it: in light and dark, on a desk and on a phone. Nothing for axe to find, nothing in the
 * console, nothing asked of another address, nothing wider than the screen, and a policy that lets no foreign script in.
 */
import AxeBuilder from '@axe-core/playwright';
import { expect, test, type Page, type Response } from '@playwright/test';
import { asForm, at, pageOf, signIn, visit } from './people';
import { createStudy, post } from './studies';

const sizes = [
  { width: 1440, height: 900 },
  { width: 390, height: 844 }
];

/** Collects what a page complains of or asks for elsewhere. */
function watch(page: Page, origin: string) {
  const heard: string[] = [];
  page.on('console', (message) => {
    // The browser itself notes the status of a page that is not there; a page's own complaints are never excused.
    const isStatus = /^Failed to load resource: the server responded with a status of 404/.test(message.text());
    if (['error', 'warning'].includes(message.type()) && !isStatus) heard.push(`${message.type()}: ${message.text()}`);
  });
  page.on('pageerror', (error) => heard.push(`thrown: ${error.message}`));
  page.on('request', (request) => {
    const url = new URL(request.url());
    if (!['data:', 'blob:'].includes(url.protocol) && url.origin !== origin) heard.push(`foreign: ${request.url()}`);
  });
  return heard;
}

/** No source of script but the server's own files and what carries the nonce of this one answer. */
function expectStrictPolicy(response: Response | null) {
  const policy = response?.headers()['content-security-policy'] ?? '';
  const directives = new Map(
    policy.split(';').map((part) => {
      const [name = '', ...sources] = part.trim().split(/\s+/);
      return [name, sources] as const;
    })
  );
  expect(directives.get('default-src')).toEqual(["'none'"]);
  const scripts = directives.get('script-src') ?? [];
  expect(scripts.length).toBeGreaterThan(0);
  for (const source of scripts) expect(source).toMatch(/^'self'$|^'nonce-[A-Za-z0-9+/=]{16,}'$/);
  for (const name of ['object-src', 'base-uri', 'frame-ancestors']) expect(directives.get(name)).toEqual(["'none'"]);
  for (const name of ['connect-src', 'form-action', 'worker-src']) expect(directives.get(name)).toEqual(["'self'"]);
}

async function expectSound(page: Page, address: string, status = 200): Promise<void> {
  const origin = new URL(test.info().project.use.baseURL ?? page.url()).origin;
  const heard = watch(page, origin);
  for (const theme of ['light', 'dark']) {
    await page.context().addCookies([{ name: 'theme', value: theme, url: origin }]);
    const response = await visit(page, address);
    expect([address, response?.status()]).toEqual([address, status]);
    expectStrictPolicy(response);
    await expect(page.locator('html')).toHaveAttribute('data-theme', theme);
    await expect(page.locator('h1')).toHaveCount(1);
    await expect(page).toHaveTitle(/Sedgeline/);
    // What is folded away is part of the page too.
    await page.evaluate(() => {
      for (const box of document.querySelectorAll<HTMLDetailsElement>('details:not(.menu)')) box.open = true;
    });
    for (const size of sizes) {
      await page.setViewportSize(size);
      const wide = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
      expect.soft(wide, `${address} in ${theme} at ${size.width} is too wide by`).toBeLessThanOrEqual(0);
      const { violations } = await new AxeBuilder({ page }).analyze();
      const found = violations.map((v) => `${v.id}: ${v.nodes.map((n) => n.html.slice(0, 160)).join(' | ')}`);
      expect.soft(found, `${address} in ${theme} at ${size.width}`).toEqual([]);
    }
  }
  expect.soft(heard, address).toEqual([]);
}

test.use({ contextOptions: { reducedMotion: 'reduce' } });

test.describe('signed out', () => {
  for (const [address, status] of [
    ['/', 200],
    ['/sign-in', 200],
    ['/sign-in?next=/studies', 200],
    ['/reset', 200],
    ['/sign-out', 200],
    ['/nowhere', 404],
    ['/invitations/unknown', 404],
    ['/reset/unknown', 404]
  ] as const) {
    test(address, async ({ page }) => expectSound(page, address, status));
  }
});

test.describe('a study', () => {
  let id: string;
  test.beforeAll(async ({ browser }) => {
    const page = await browser.newPage();
    await signIn(page, at('ecologist'));
    id = await createStudy(page, 'Newts looked at closely', 'whole');
    // Open questions, an answer and a value that changed since, so that pages are seen with something on them.
    for (const [anchor, body] of [
      ['rate:competition.alpha12', 'Which trial gives this coefficient?'],
      ['point:D', 'Is this above the level of 1990?'],
      ['study:', 'Agreed with the warden.']
    ] as const) {
      await post(page, `/studies/${id}/review?/open`, { anchor, kind: 'question', body, here: `/studies/${id}` });
    }
    const share = await page.request.post(`/studies/${id}/sharing?/share`, {
      headers: asForm(page),
      form: { email: at('reviewer'), role: 'reviewer' }
    });
    expect(share.ok()).toBe(true);
    await page.close();
  });

  for (const part of [
    '',
    '/question',
    '/rates',
    '/rates?edit=first.growth.r',
    '/model',
    '/equilibria',
    '/trajectories',
    '/surveys',
    '/levers',
    '/risk',
    '/review',
    '/report',
    '/sharing',
    '/history',
    '/history?version=1'
  ]) {
    test(`its page ${part || 'of overview'}`, async ({ page }) => {
      await signIn(page, at('ecologist'));
      await expectSound(page, `/studies/${id}${part}`);
    });
  }

  test('as its reviewer and its reader see it', async ({ page, browser }) => {
    await signIn(page, at('reviewer'));
    for (const part of ['/rates', '/review']) await expectSound(page, `/studies/${id}${part}`);
    const other = await pageOf(browser, at('observer'));
    await expectSound(other, '/studies');
    await other.context().close();
  });

  test('before anything is entered', async ({ page }) => {
    await signIn(page, at('ecologist'));
    const fresh = await createStudy(page, 'Newts not yet counted');
    for (const part of ['', '/equilibria', '/trajectories']) await expectSound(page, `/studies/${fresh}${part}`);
  });
});

test.describe('behind the sign-in', () => {
  for (const address of ['/studies', '/studies?q=no-such-study', '/studies/new']) {
    test(address, async ({ page }) => {
      await signIn(page, at('ecologist'));
      await expectSound(page, address);
    });
  }
  for (const section of ['profile', 'tokens', 'members', 'mail', 'audit']) {
    test(`settings, ${section}`, async ({ page }) => {
      await signIn(page, at('administrator'));
      await expectSound(page, `/settings/${section}`);
    });
  }
  test('what is not there, or not yours', async ({ page }) => {
    await signIn(page, at('ecologist'));
    await expectSound(page, '/studies/00000000-0000-4000-8000-000000000000', 404);
  });
});
