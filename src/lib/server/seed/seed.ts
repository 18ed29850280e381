import { seedPeople } from './seedPeople';
import { seedStudies } from './seedStudies';

/** Makes the demo, once: safe to repeat. */
export async function seed(): Promise<void> {
  const people = await seedPeople();
  await seedStudies(people);
}
