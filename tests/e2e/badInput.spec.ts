/** Hostile and hasty input: what was typed stays, field and fix are named, and the server never stumbles. */
import { expect, test, type Locator, type Page } from '@playwright/test';
import { asForm, at, ownOrigin, signIn, visit } from './people';
import { createStudy, entry, question, rates, revisionOf } from './studies';

const script = '<script>window.hit = true</script>';
const long = 'reed '.repeat(20_000);

/** Fails the test when anything is answered with 500 or a page throws. */
function guard(page: Page) {
  const faults: string[] = [];
  page.on('response', (response) => {
    if (response.status() >= 500) faults.push(`${response.status()} ${response.url()}`);
  });
  page.on('pageerror', (error) => faults.push(error.message));
  return faults;
}

/** Fills by accessible name, sends, and expects each text to stand where it was typed and each complaint to be read. */
async function expectKept(
  form: Locator,
  typed: Record<string, string>,
  send: string | RegExp,
  complaints: readonly (string | RegExp)[]
) {
  for (const [label, text] of Object.entries(typed))
    await form.getByRole('textbox', { name: label, exact: true }).fill(text);
  // Only the answer to this post counts; a complaint of the one before may still stand.
  const answered = form.page().waitForResponse((response) => response.request().method() === 'POST');
  await form.getByRole('button', { name: send }).first().click();
  expect((await answered).status()).toBeLessThan(500);
  for (const complaint of complaints) await expect(form.getByText(complaint).first()).toBeVisible();
  for (const [label, text] of Object.entries(typed))
    await expect(form.getByRole('textbox', { name: label, exact: true })).toHaveValue(text);
}

/** Every field that is marked wrong says why, in words tied to it. */
async function expectExplained(form: Locator) {
  const silent = await form.evaluate((element) =>
    [...element.querySelectorAll('[aria-invalid="true"]')]
      .filter((field) => {
        const ids = field.getAttribute('aria-describedby')?.split(' ') ?? [];
        return !ids.some((id) => document.getElementById(id)?.textContent?.trim());
      })
      .map((field) => field.outerHTML.slice(0, 120))
  );
  expect(silent).toEqual([]);
}

test('the question', async ({ page }) => {
  const faults = guard(page);
  await signIn(page, at('ecologist'));
  await visit(page, '/studies/new');
  const form = page.locator('main form');
  const first = form.getByRole('group', { name: /First species/ });

  await form.getByRole('button', { name: 'Create the study' }).click();
  for (const complaint of [
    'Say what the study is called.',
    'Say where it is.',
    'Choose how the two species meet.',
    'Say the common name of the first species.',
    'Say what the study should decide.'
  ]) {
    await expect(form.getByText(complaint).first()).toBeVisible();
  }
  await expectExplained(form);
  // The list at the head leads to the field.
  await form.getByRole('link', { name: /^Place:/ }).click();
  await expect(form.getByLabel('Place')).toBeFocused();

  await first.getByLabel('Common name').fill(script);
  for (const [area, risk, horizon, complaints] of [
    ['-1', '101', '0', ['The area must be above 0.', 'Between 0 and 100 %.', 'The horizon must be above 0.']],
    ['1e400', 'NaN', 'ten', [/1e400 is too large/, '“NaN” is not a number.', '“ten” is not a number.']],
    ['0', '-3', '', ['The area must be above 0.', 'Between 0 and 100 %.', /horizon/i]],
    ['1,234', '5 %', '1e7', [/the comma could mean either/, '“5 %” is not a number.', 'The horizon is too long.']]
  ] as const) {
    await expectKept(
      form,
      { 'Name of the study': script, Place: long.slice(0, 500), Area: area, 'Acceptable risk': risk, Horizon: horizon },
      'Create the study',
      [...complaints, 'Keep this under 160 characters.']
    );
  }
  await expectExplained(form);
  await expect(first.getByLabel('Common name')).toHaveValue(script);
  expect(await page.evaluate(() => 'hit' in window)).toBe(false);
  expect(faults).toEqual([]);
});

test('words that look like markup stay words on every page', async ({ page }) => {
  const faults = guard(page);
  await signIn(page, at('ecologist'));
  const answer = await page.request.post('/studies/new', {
    headers: asForm(page),
    maxRedirects: 0,
    form: { ...question, title: script, place: script, firstCommon: `${script}a`, secondCommon: '$\\alpha$ {b} %_\\' }
  });
  const id = /([0-9a-f-]{36})/.exec(answer.headers()['location'] ?? '')?.[1] ?? '';
  expect(id).not.toBe('');
  let revision = 1;
  for (const rate of rates) {
    const saved = await page.request.patch(`/api/v1/studies/${id}/rates`, {
      headers: ownOrigin(page),
      data: { revision, rate: entry({ ...rate, source: { kind: 'judgement', text: script } } as never) }
    });
    expect(saved.status()).toBe(200);
    revision += 1;
  }
  for (const part of ['', '/rates', '/model', '/equilibria', '/trajectories', '/history', '/review']) {
    await visit(page, `/studies/${id}${part}`);
    await expect(page.locator('h1').first()).toBeVisible();
    expect(await page.evaluate(() => 'hit' in window)).toBe(false);
  }
  await expect(page.locator('.rail').getByText(script).first()).toBeAttached();
  expect(faults).toEqual([]);
});

test('a rate', async ({ page }) => {
  const faults = guard(page);
  await signIn(page, at('ecologist'));
  const id = await createStudy(page, 'Newts mistyped');
  await visit(page, `/studies/${id}/rates?edit=first.growth.K`);
  const form = page.locator('form[action="?/save"]');
  await form.getByRole('button', { name: /^Save/ }).click();
  for (const complaint of ['Give the value.', 'Give the standard error, or say that the value is exact.']) {
    await expect(form.getByText(complaint).first()).toBeVisible();
  }
  await expectExplained(form);
  await form.getByLabel('Kind of source').selectOption('own survey');
  for (const [value, se, complaints] of [
    ['-5', '1', [/above 0|positive/i]],
    ['0', '1', [/above 0|positive/i]],
    ['1e400', '1', [/too large/]],
    ['NaN', '1', ['“NaN” is not a number.']],
    ['400', '-2', [/Standard error:/]],
    [script, 'Infinity', [/is not a number/]]
  ] as const) {
    await expectKept(form, { Value: value, 'Standard error': se, Source: 'Torch counts' }, /^Save/, complaints);
    await expect(form.getByLabel('Kind of source')).toHaveValue('own survey');
  }
  await expectKept(form, { Value: '400', 'Standard error': '10', Source: long.slice(0, 5000) }, /^Save/, [
    /Keep this to \d+ characters/
  ]);
  await form.getByLabel('How sure').selectOption('range');
  await expectKept(form, { Value: '400', 'Lower end': '500', 'Upper end': '300', Source: 'Counts' }, /^Save/, [
    /Lower end:|Upper end:|range/i
  ]);
  await expectExplained(form);
  expect(await revisionOf(page, id)).toBe(1);
  expect(faults).toEqual([]);
});

test('starts and the length of a run', async ({ page }) => {
  const faults = guard(page);
  await signIn(page, at('ecologist'));
  const id = await createStudy(page, 'Newts counted wrongly', 'whole');
  await visit(page, `/studies/${id}/trajectories`);
  const save = page.getByRole('button', { name: 'Save the starts' });
  for (const [x, y, complaint] of [
    ['-1', '2', /0 or more|below 0|negative/i],
    ['', '2', 'Give a count, 0 if none.'],
    ['1e400', '2', /too large/],
    [script, '2', /is not a number/]
  ] as const) {
    await page.locator('#start-0-x').fill(x);
    await page.locator('#start-0-y').fill(y);
    await save.click();
    await expect(page.getByText(complaint).first()).toBeVisible();
    await expect(page.locator('#start-0-x')).toHaveAttribute('aria-invalid', 'true');
    await expect(page.locator('#start-0-x')).toHaveValue(x);
    await expect(page.locator('#start-0-y')).toHaveValue(y);
  }
  await page.locator('summary', { hasText: 'Length, tolerances' }).click();
  const form = page.locator('form[action="?/run"]');
  for (const [length, times, tolerance] of [
    ['0', '1', '2'],
    ['-4', '1e9', '0'],
    ['1e400', 'two', 'NaN'],
    ['', '', '']
  ] as const) {
    const typed = { Length: length, 'Output times': times, 'Relative tolerance': tolerance };
    await expectKept(form, typed, 'Save and run', [/^Length:/, /^Output times:/, /^Relative tolerance:/]);
    await expectExplained(form);
  }
  expect(faults).toEqual([]);
});

test('a comment, an invitation, a name, a token', async ({ page }) => {
  const faults = guard(page);
  await signIn(page, at('administrator'));
  const id = await createStudy(page, 'Newts remarked upon');

  await visit(page, `/studies/${id}/review`);
  await page.locator('summary', { hasText: 'Comment' }).click();
  const comment = page.locator('details.new-thread form');
  await comment.getByRole('button', { name: 'Comment', exact: true }).click();
  await expect(comment.locator('.bad').first()).toBeVisible();
  await comment.getByLabel('Comment', { exact: true }).fill(long.slice(0, 30_000));
  await comment.getByRole('button', { name: 'Comment', exact: true }).click();
  await expect(comment.locator('.bad').first()).toContainText(/\d+ characters/);
  await expect(comment.getByLabel('Comment', { exact: true })).toHaveValue(long.slice(0, 30_000));
  await comment.getByLabel('Comment', { exact: true }).fill(script);
  await comment.getByRole('button', { name: 'Comment', exact: true }).click();
  await expect(page.getByText(script).first()).toBeVisible();

  await visit(page, `/studies/${id}/sharing`);
  const share = page.locator('form[action="?/share"]');
  for (const email of [
    '',
    'nobody',
    'a b@c',
    `${'x'.repeat(300)}@elsewhere.example`,
    'x@y.example\r\nBcc: z@y.example'
  ]) {
    await share.getByLabel('E-mail address').fill(email);
    await share.getByRole('button', { name: 'Send the invitation' }).click();
    await expect(share.locator('.bad').first()).toBeVisible();
  }

  await visit(page, '/settings/members');
  const invite = page.locator('form[action^="?/invite"]');
  await invite.getByRole('textbox').first().fill('nobody');
  await invite.getByRole('button').first().click();
  await expect(invite.locator('.bad').first()).toBeVisible();
  await expect(invite.getByRole('textbox').first()).toHaveValue('nobody');

  await visit(page, '/settings/tokens');
  const token = page.locator('form[action="?/mint"]');
  await token.getByRole('button').first().click();
  await expect(token.locator('.bad').first()).toBeVisible();

  await visit(page, '/settings/profile');
  const name = page.locator('form[action="?/profile"]');
  await name.getByLabel('Name').fill('');
  await name.getByRole('button').click();
  await expect(name.locator('.bad').first()).toBeVisible();
  const password = page.locator('form[action="?/password"]');
  await password.getByLabel('Present password').fill('not this one at all');
  await password.getByLabel('New password').fill('short');
  await password.getByRole('button').click();
  await expect(password.locator('.bad').first()).toBeVisible();
  expect(faults).toEqual([]);
});

test('signing in and asking for a new password', async ({ page }) => {
  const faults = guard(page);
  await visit(page, '/sign-in');
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.locator('.bad').first()).toBeVisible();
  await page.getByLabel('Work email').fill(at('ecologist'));
  await page.getByLabel('Password', { exact: true }).fill(`' or 1=1; --${script}`);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await expect(page.getByText('Not signed in.')).toBeVisible();
  await expect(page.getByLabel('Work email')).toHaveValue(at('ecologist'));
  // A password never travels back.
  await expect(page.getByLabel('Password', { exact: true })).toHaveValue('');
  await visit(page, '/reset');
  await page.getByLabel('Work email').fill('nobody');
  await page.getByRole('button', { name: 'Send the link' }).click();
  await expect(page.locator('.bad').first()).toBeVisible();
  await expect(page.getByLabel('Work email')).toHaveValue('nobody');
  expect(faults).toEqual([]);
});

test('the API says 422 and the path, whatever it is sent', async ({ page }) => {
  await signIn(page, at('ecologist'));
  const id = await createStudy(page, 'Newts by wire', 'whole');
  const model = {
    interaction: 'competition',
    first: { growth: { kind: 'logistic', r: 0.9, K: 420 } },
    second: { growth: { kind: 'logistic', r: 0.6, K: 310 } },
    competition: { form: 'coefficients', alpha12: 0.7, alpha21: 0.5 }
  };
  const send = (method: string, address: string, data: string | object) =>
    page.request.fetch(address, {
      method,
      headers: { ...ownOrigin(page), 'content-type': 'application/json' },
      data: typeof data === 'string' ? data : JSON.stringify(data)
    });
  const refused = async (method: string, address: string, data: string | object, path: string, status = 422) => {
    const answer = await send(method, address, data);
    const said = `${method} ${address} ${(typeof data === 'string' ? data : JSON.stringify(data)).slice(0, 160)}`;
    expect([said, answer.status()]).toEqual([said, status]);
    expect(answer.headers()['content-type']).toContain('application/problem+json');
    const problem = (await answer.json()) as { detail: string; errors?: { path: string; detail: string }[] };
    expect([said, (problem.errors ?? []).map((error) => error.path)]).toEqual([said, expect.arrayContaining([path])]);
    expect(JSON.stringify(problem)).not.toMatch(/node_modules|sequelize|select |\bat .*\.js/i);
  };
  const growth = (r: unknown, K: unknown) => ({ ...model, first: { growth: { kind: 'logistic', r, K } } });

  for (const [bad, path] of [
    [growth(-1, 420), 'model.first.growth.r'],
    [growth(0.9, 0), 'model.first.growth.K'],
    [growth(0.9, undefined), 'model.first.growth.K'],
    [growth('0.9', 420), 'model.first.growth.r'],
    [growth(null, 420), 'model.first.growth.r'],
    [{ ...model, first: { growth: { kind: 'exponential', r: 1 } } }, 'model.first.growth.kind'],
    [{ ...model, competition: undefined }, 'model.competition'],
    [{ ...model, colour: 'green' }, 'model.colour']
  ] as const) {
    await refused('POST', '/api/v1/equilibria', { model: bad }, path);
    await refused(
      'POST',
      '/api/v1/trajectories',
      { model: bad, start: { x: 1, y: 1 }, span: [0, 1], samples: 11 },
      path
    );
  }
  const text = JSON.stringify({ model });
  await refused('POST', '/api/v1/equilibria', text.replace('0.9', '1e400'), 'model.first.growth.r');
  for (const nonsense of [text.replace('0.9', 'NaN'), '', '{', script, '\u0000']) {
    await refused('POST', '/api/v1/equilibria', nonsense, '');
  }
  for (const nonsense of ['null', '[]', '7']) {
    const answer = await send('POST', '/api/v1/equilibria', nonsense);
    expect([nonsense, answer.status()]).toEqual([nonsense, 422]);
  }
  await refused('POST', '/api/v1/equilibria', `{"model":"${'x'.repeat(10 * 1024 * 1024)}"}`, '');
  const run = { model, start: { x: 10, y: 5 }, span: [0, 10], samples: 11 };
  for (const [change, path] of [
    [{ start: { x: -1, y: 5 } }, 'start.x'],
    [{ samples: 1e9 }, 'samples'],
    [{ rtol: 0 }, 'rtol'],
    [{ hurry: true }, 'hurry']
  ] as const) {
    await refused('POST', '/api/v1/trajectories', { ...run, ...change }, path);
  }

  const at8 = (rate: Record<string, unknown>) => ({ revision: 8, rate });
  const K = { path: 'first.growth.K', value: 400, unit: '{ind}/har' };
  for (const [rate, path] of [
    [entry({ ...K, value: -4 }), 'rate.value'],
    [entry({ ...K, value: '400' }), 'rate.value'],
    [entry({ ...K, unit: 'kg/har' }), 'rate.unit'],
    [{ ...entry(K), uncertainty: { kind: 'se', se: -1 } }, 'rate.uncertainty.se'],
    [{ ...entry(K), source: { kind: 'hearsay', text: 'x' } }, 'rate.source.kind'],
    [{ ...entry(K), source: { kind: 'own survey', text: 'a\u0000b' } }, 'rate.source.text'],
    [{ ...entry(K), extra: 1 }, 'rate.extra'],
    [entry({ ...K, path: 'feeding.a' }), 'rate.path'],
    [entry({ ...K, path: '__proto__' }), 'rate.path']
  ] as const) {
    await refused('PATCH', `/api/v1/studies/${id}/rates`, at8(rate), path);
  }
  await refused('PATCH', `/api/v1/studies/${id}/rates`, { revision: -1, rate: entry(K) }, 'revision');
  await refused(
    'POST',
    `/api/v1/studies/${id}/comments`,
    { anchor: { kind: 'study' }, kind: 'note', body: '' },
    'body'
  );

  // What is no address, or does not take that method, is said so; a study that was never there is 404.
  expect((await send('DELETE', `/api/v1/studies/${id}`, {})).status()).toBe(405);
  expect((await send('PUT', '/api/v1/equilibria', {})).status()).toBe(405);
  expect((await page.request.get('/api/v1/nothing')).status()).toBe(404);
  expect((await page.request.get('/api/v1/studies/%00')).status()).toBe(404);
  expect((await page.request.get(`/studies/${'x'.repeat(3000)}`)).status()).toBe(404);
  expect(await revisionOf(page, id)).toBe(8);
});
