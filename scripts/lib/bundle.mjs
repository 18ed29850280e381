/** Bundles a TypeScript entry of `src` for plain Node, with the `$lib` alias and without the framework. */
import { basename, join } from 'node:path';
import { root, stateFolder } from './project.mjs';
import { Refusal } from './say.mjs';
import { hashOf, isStamped, stamp } from './stamps.mjs';

/** @param {string} entry such as `src/lib/server/cli/token.cli.ts` @returns {Promise<string>} the bundle's path */
export async function bundle(entry) {
  // Below the project's folder, so that the packages it imports are found from there.
  const outDir = join(stateFolder, 'bundles', basename(entry, '.ts'));
  const file = join(outDir, 'main.mjs');
  const hash = hashOf(root, ['src/lib', 'package-lock.json'], entry);
  if (isStamped(join(outDir, 'stamp'), hash)) return file;
  // Imported late: on a fresh clone the packages are installed first.
  const { build } = await import('vite');
  try {
    await build({
      configFile: false,
      root,
      logLevel: 'error',
      resolve: { alias: { $lib: join(root, 'src', 'lib') } },
      build: {
        ssr: true,
        target: 'node20',
        outDir,
        emptyOutDir: true,
        copyPublicDir: false,
        rollupOptions: {
          input: join(root, entry),
          output: { entryFileNames: 'main.mjs', chunkFileNames: '[name]-[hash].mjs' }
        }
      }
    });
  } catch (error) {
    throw new Refusal(`${entry} could not be bundled: ${error.message}`);
  }
  stamp(join(outDir, 'stamp'), hash);
  return file;
}
