import { expect, type Browser, type Page } from '@playwright/test';

export const PASSWORD = 'reed-and-water-2026';
export const at = (name: 'administrator' | 'ecologist' | 'reviewer' | 'observer') => `${name}@quillmere.example`;

/** Goes to a page and waits until its script has taken over, so that the first press is not lost. */
export async function visit(page: Page, address: string) {
  const response = await page.goto(address);
  await page.waitForLoadState('networkidle');
  return response;
}

/** Signs in through the form and lands on the list of studies. */
export async function signIn(page: Page, email: string, password = PASSWORD): Promise<void> {
  await visit(page, '/sign-in');
  await page.getByLabel('Work email').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page).toHaveURL(/\/studies/);
}

/** A page of somebody else's browser. */
export async function pageOf(browser: Browser, email: string): Promise<Page> {
  const context = await browser.newContext();
  const page = await context.newPage();
  await signIn(page, email);
  return page;
}

/** The headers a page's own script would send; forms and changes are taken from the own origin alone. */
export const ownOrigin = (page: Page) => ({ origin: new URL(page.url()).origin });

/** The same for a form sent by a browser that runs no script: it is answered with a page or an address to go to. */
export const asForm = (page: Page) => ({ ...ownOrigin(page), accept: 'text/html' });
