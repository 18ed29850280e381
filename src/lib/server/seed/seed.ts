import { seedPeople } from './seedPeople';

/** Makes the demo, once: safe to repeat. */
export async function seed(): Promise<void> {
  await seedPeople();
}
