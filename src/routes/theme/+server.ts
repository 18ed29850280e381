import { safeNext } from '$lib/server/kit/requireUser';
import { redirect, type RequestHandler } from '@sveltejs/kit';

const themes = ['light', 'dark', 'system'];
const aYear = 31_536_000;

/** Only a path of this site, so that the form cannot be used to send somebody elsewhere. */
function backTo(referer: string | null, origin: string): string {
  if (!referer || !URL.canParse(referer)) return '/';
  const url = new URL(referer);
  return url.origin === origin ? safeNext(url.pathname + url.search, '/') : '/';
}

/** Keeps the theme chosen without script; the page's script writes the same cookie by itself. */
export const POST: RequestHandler = async ({ request, cookies, url }) => {
  // A form that cannot be read chooses nothing.
  const chosen = await request.formData().then(
    (form) => form.get('theme'),
    () => null
  );
  const theme = themes.find((known) => known === chosen) ?? 'system';
  // Readable by script: the switch in the page writes this cookie too.
  cookies.set('theme', theme, {
    path: '/',
    maxAge: aYear,
    sameSite: 'lax',
    httpOnly: false,
    secure: url.protocol === 'https:'
  });
  redirect(303, backTo(request.headers.get('referer'), url.origin));
};
