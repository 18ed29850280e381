/** The list of studies, and two people at one study. */
import { expect, test, type Page } from '@playwright/test';
import { asForm, at, ownOrigin, pageOf, signIn, visit } from './people';
import { createStudy, entry, question, revisionOf, saveRate } from './studies';

/** A word that no other test uses, so that a list holds what this one made. */
const mark = () => `mark${Date.now().toString(36)}${Math.floor(Math.random() * 1e6).toString(36)}`;
const titles = (page: Page) => page.locator('main h2 a');

test('is searched, filtered and sorted in the address bar', async ({ page }) => {
  await signIn(page, at('ecologist'));
  const word = mark();
  for (const [title, place] of [
    [`Bittern ${word}`, 'Zeal Mere'],
    [`Avocet ${word}`, 'Reed Bay'],
    [`Curlew ${word}`, 'Ash Pond']
  ] as const) {
    const answer = await page.request.post('/studies/new', {
      headers: asForm(page),
      maxRedirects: 0,
      form: {
        ...question,
        title,
        place,
        ...(title.startsWith('Curlew') ? { interaction: 'consumer-resource' } : {})
      }
    });
    expect(answer.status()).toBe(303);
  }

  await visit(page, '/studies');
  await page.getByRole('searchbox').fill(word);
  await expect(page).toHaveURL(new RegExp(`q=${word}`));
  await expect(titles(page)).toHaveCount(3);
  await expect(page.getByRole('searchbox')).toBeFocused();
  await page.getByLabel('Order').selectOption('title');
  await expect(page).toHaveURL(/sort=title/);
  await expect(titles(page)).toHaveText([`Avocet ${word}`, `Bittern ${word}`, `Curlew ${word}`]);
  await page.getByLabel('Order').selectOption('place');
  await expect(titles(page)).toHaveText([`Curlew ${word}`, `Avocet ${word}`, `Bittern ${word}`]);
  await page.getByLabel('How the species meet').selectOption('consumer-resource');
  await expect(titles(page)).toHaveText([`Curlew ${word}`]);

  // The address alone gives the same list, controls included; nonsense in it is no error.
  await page.reload();
  await expect(titles(page)).toHaveText([`Curlew ${word}`]);
  await expect(page.getByRole('searchbox')).toHaveValue(word);
  await expect(page.getByLabel('Order')).toHaveValue('place');
  expect((await visit(page, `/studies?q=${word}&sort=colour&page=-3&state=x`))?.status()).toBe(200);
  await expect(titles(page)).toHaveCount(3);
  await visit(page, '/studies?q=%25_%27%22%3Cscript%3E');
  await expect(page.getByText('No study matches.')).toBeVisible();
  await page.getByRole('link', { name: 'Show all open studies' }).click();
  await expect(page).toHaveURL(/\/studies$/);
});

test('a study is duplicated, archived, restored, deleted and brought back', async ({ page }) => {
  await signIn(page, at('ecologist'));
  const title = `Heron ${mark()}`;
  const id = await createStudy(page, title, 'whole');
  const list = `/studies?q=${encodeURIComponent(title)}&state=all`;
  const act = async (name: string) => {
    await page.locator('main').getByLabel(`Actions for ${title}`, { exact: true }).click();
    await page.getByRole('button', { name, exact: true }).click();
  };

  await visit(page, list);
  await act('Duplicate');
  await expect(page).toHaveURL(/\/studies\/[0-9a-f-]{36}$/);
  await expect(page).not.toHaveURL(new RegExp(id));
  await expect(page).toHaveTitle(new RegExp(`Copy of ${title}`));
  const copy = page.url().split('/').at(-1) ?? '';
  const said = async (of: string) => {
    const { content } = await (await page.request.get(`/api/v1/studies/${of}`)).json();
    return content;
  };
  expect(await said(copy)).toEqual(await said(id));

  await visit(page, list);
  await act('Archive');
  await expect(page.getByText(`“${title}” archived.`)).toBeVisible();
  const refused = await page.request.patch(`/api/v1/studies/${id}/rates`, {
    headers: ownOrigin(page),
    data: { revision: 8, rate: entry({ path: 'first.growth.r', value: 1, unit: '/a' }) }
  });
  expect(refused.status()).toBe(409);
  await visit(page, `/studies/${id}/rates`);
  await expect(page.getByText('This study is archived.')).toBeVisible();
  await visit(page, list);
  await act('Restore');
  await expect(page.getByText(`“${title}” restored.`)).toBeVisible();

  await act('Delete');
  await expect(page.getByText(`“${title}” deleted.`)).toBeVisible();
  await expect(titles(page)).toHaveCount(1);
  expect((await page.request.get(`/studies/${id}`)).status()).toBe(404);
  await page.getByRole('button', { name: 'Undo' }).last().click();
  await expect(titles(page)).toHaveCount(2);
  expect((await page.request.get(`/studies/${id}`)).status()).toBe(200);
});

test('somebody who has no study is told what to do, and may not make one where the role forbids', async ({
  page,
  browser
}) => {
  // Invited to one study only: a member of no workspace.
  const author = await pageOf(browser, at('ecologist'));
  const id = await createStudy(author, `Lent ${mark()}`);
  const email = `guest-${mark()}@elsewhere.example`;
  await visit(author, `/studies/${id}/sharing`);
  await author.getByLabel('E-mail address').fill(email);
  await author.getByRole('button', { name: 'Send the invitation' }).click();
  await expect(author.getByText(`An invitation is on its way to ${email}.`)).toBeVisible();
  const administrator = await pageOf(browser, at('administrator'));
  await visit(administrator, '/settings/mail');
  const message = administrator.locator('article', { hasText: email }).first();
  const link = await message.locator('a[href*="/invitations/"]').first().getAttribute('href');
  await visit(page, link ?? '');
  await page.getByLabel('Your name').fill('A guest');
  await page.getByLabel('Password', { exact: true }).fill('a-long-reed-by-the-water');
  await page.getByRole('button', { name: 'Accept and sign in' }).click();
  await expect(page).toHaveURL(/\/studies/);

  // A link that was sent to the wrong person can be taken back before it is used.
  const wrong = `wrong-${email}`;
  await visit(author, `/studies/${id}/sharing`);
  await author.getByLabel('E-mail address').fill(wrong);
  await author.getByRole('button', { name: 'Send the invitation' }).click();
  await author.getByRole('button', { name: `Withdraw the invitation of ${wrong}` }).click();
  await expect(author.getByRole('row', { name: wrong })).toHaveCount(0);
  await author.getByRole('button', { name: /Take the study back/ }).click();
  await expect(author.getByText('A guest')).toHaveCount(0);
  await visit(page, '/studies');
  await expect(page.getByText('No studies yet.').first()).toBeVisible();
  await expect(page.getByText('When somebody shares a study with you, it appears here.')).toBeVisible();
  await expect(page.getByRole('link', { name: 'New study' })).toHaveCount(0);
  expect((await page.request.get(`/studies/${id}`)).status()).toBe(404);
  const made = await page.request.post('/studies/new', { headers: asForm(page), form: question, maxRedirects: 0 });
  expect(made.status()).toBe(403);
});

test('two people at one study: the second to save sees the difference, keeps the text and saves again', async ({
  page,
  browser
}) => {
  await signIn(page, at('ecologist'));
  const id = await createStudy(page, `Shared pond ${mark()}`, 'whole');
  const second = await pageOf(browser, at('ecologist'));

  await visit(second, `/studies/${id}/rates?edit=first.growth.r`);
  const form = second.locator('form[action="?/save"]');
  await form.getByLabel('Value', { exact: true }).fill('0.95');
  await form.getByLabel('Source', { exact: true }).fill('Recounted by the second person');

  let revision = 8;
  revision = await saveRate(page, id, revision, entry({ path: 'first.growth.K', value: 444, unit: '{ind}/har' }));
  await form.getByRole('button', { name: /^Save/ }).click();
  const notice = form.locator('.callout.error').first();
  await expect(notice).toContainText('after you opened');
  await expect(notice).toContainText('444');
  await expect(form.getByLabel('Value', { exact: true })).toHaveValue('0.95');
  await expect(form.getByLabel('Source', { exact: true })).toHaveValue('Recounted by the second person');
  expect(await revisionOf(page, id)).toBe(revision);
  await form.getByRole('button', { name: /^Save/ }).click();
  await expect(second.locator('tr[id="rate-first.growth.r"]')).toContainText('Recounted by the second person');
  await expect(second.locator('tr[id="rate-first.growth.K"]')).toContainText('444');
  revision += 1;

  // The same with the starts, which are saved by a form of another kind.
  await visit(second, `/studies/${id}/trajectories`);
  await second.locator('#start-0-x').fill('77');
  revision = await saveRate(page, id, revision, entry({ path: 'first.growth.K', value: 450, unit: '{ind}/har' }));
  await second.getByRole('button', { name: 'Save the starts' }).click();
  await expect(second.getByText(/after you opened/).first()).toBeVisible();
  await expect(second.locator('#start-0-x')).toHaveValue('77');
  expect(await revisionOf(page, id)).toBe(revision);
  await second.getByRole('button', { name: 'Save the starts' }).click();
  await expect(second.getByText(/after you opened/)).toHaveCount(0);
  await expect.poll(() => revisionOf(page, id)).toBe(revision + 1);
});

test('versions: what changed, and the way back', async ({ page }) => {
  await signIn(page, at('ecologist'));
  const id = await createStudy(page, `Versions ${mark()}`, 'whole');
  await saveRate(page, id, 8, entry({ path: 'first.growth.K', value: 123, unit: '{ind}/har' }));
  await visit(page, `/studies/${id}/history?version=8`);
  await expect(page.getByRole('heading', { name: 'From version 8 to version 9' })).toBeVisible();
  const differs = page.getByRole('region', { name: 'What differs' });
  await expect(differs).toContainText('400');
  await expect(differs).toContainText('123');
  await page.getByRole('button', { name: 'Make version 8 the newest again' }).click();
  await expect.poll(() => revisionOf(page, id)).toBe(10);
  await visit(page, `/studies/${id}/rates`);
  await expect(page.locator('tr[id="rate-first.growth.K"]')).toContainText('400');
});
