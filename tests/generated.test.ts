import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { planarFile } from '../scripts/lib/planarTemplate.mjs';

it('the planar integrators are what their template says', async () => {
  const path = join(import.meta.dirname, '..', 'src', 'lib', 'dynamics', 'solve', 'planarKernels.ts');
  expect(readFileSync(path, 'utf8')).toBe(await planarFile(path));
});
