import { expect, type Browser, type Page } from '@playwright/test';

export const PASSWORD = 'reed-and-water-2026';
export const at = (name: 'administrator' | 'ecologist' | 'reviewer' | 'observer') => `${name}@quillmere.example`;

/** Signs in through the form and lands on the list of studies. */
export async function signIn(page: Page, email: string, password = PASSWORD): Promise<void> {
  await page.goto('/sign-in');
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
