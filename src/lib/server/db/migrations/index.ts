/** Every migration, oldest first, listed by hand so that any bundler and any test sees the same list. */
import type { Migration } from './migration';
import { people } from './20261201T0600-people';
import { addStudies } from './20261201T0700-add-studies';

export type { Migration };

export const migrations: readonly Migration[] = [people, addStudies];
