/** Stamps: a hash of what a step was made from, kept beside what it made, so that the step is skipped while nothing changed. */
import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, readdirSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join, relative } from 'node:path';

function* filesUnder(path) {
  if (!existsSync(path)) return;
  if (!statSync(path).isDirectory()) {
    yield path;
    return;
  }
  for (const entry of readdirSync(path).sort()) yield* filesUnder(join(path, entry));
}

/** Hash of the names and contents of all files under `paths`, and of some `extra` text such as settings. */
export function hashOf(root, paths, extra = '') {
  const hash = createHash('sha256').update(extra);
  for (const path of paths) {
    for (const file of filesUnder(join(root, path))) {
      hash.update(`\0${relative(root, file)}\0`).update(readFileSync(file));
    }
  }
  return hash.digest('hex');
}

/** Whether the stamp file holds this hash. */
export function isStamped(file, hash) {
  return existsSync(file) && readFileSync(file, 'utf8').trim() === hash;
}

/** Writes the stamp. */
export function stamp(file, hash) {
  mkdirSync(dirname(file), { recursive: true });
  writeFileSync(file, `${hash}\n`);
}
