import { seedPeople } from './seedPeople';
import { seedStudies } from './seedStudies';

/** Makes the demo, people first, then their studies: as far as it is not there yet, so it is safe to repeat. */
export async function seed(): Promise<void> {
  await seedStudies(await seedPeople());
}
