import adapter from '@sveltejs/adapter-node';
import { vitePreprocess } from '@sveltejs/vite-plugin-svelte';

/** @type {import('@sveltejs/kit').Config} */
export default {
  preprocess: vitePreprocess(),
  kit: {
    adapter: adapter({ out: 'build', precompress: true }),
    // The server checks the origin of form posts; the address it is served from is set by ORIGIN.
    csrf: { trustedOrigins: (process.env.TRUSTED_ORIGINS ?? '').split(',').filter(Boolean) },
    csp: {
      mode: 'nonce',
      directives: {
        'default-src': ['none'],
        'script-src': ['self'],
        // Svelte writes style attributes for measured positions; no style element is inlined.
        'style-src': ['self', 'unsafe-inline'],
        'img-src': ['self', 'data:'],
        'font-src': ['self'],
        'connect-src': ['self'],
        'worker-src': ['self'],
        'manifest-src': ['self'],
        'form-action': ['self'],
        'base-uri': ['none'],
        'frame-ancestors': ['none'],
        'object-src': ['none']
      }
    },
    typescript: {
      config: (c) => {
        // odex ships TypeScript source that does not pass a strict check; its types are restated here.
        c.compilerOptions.paths.odex = ['../src/types/odex.d.ts'];
        c.include = [...c.include, '../scripts/**/*.ts'];
        return c;
      }
    }
  }
};
