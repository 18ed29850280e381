/** Writes the planar integrators of the engine from their template. */
import { writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { planarFile } from './lib/planarTemplate.mjs';
import { root } from './lib/project.mjs';

const path = join(root, 'src', 'lib', 'dynamics', 'solve', 'planarKernels.ts');
await writeFile(path, await planarFile(path));
console.log(`Written: ${path}`);
