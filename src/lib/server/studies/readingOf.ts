import type { StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { PersonName } from '$lib/contracts/views';
import { User } from '../db/models/User';
import { inputsFingerprint, type ResultPart } from './fingerprint';
import { latestReadings } from './surroundings';

/** What an author last said a result says. */
export interface ReadingView {
  sentence: string;
  reader: PersonName;
  at: string;
  revision: number;
  /** True once the inputs have changed since it was written. */
  isStale: boolean;
}

/** The latest reading of a part, or null where there is none. */
export async function readingOf(
  studyId: string,
  part: ResultPart,
  question: StudyQuestion,
  content: StudyContent
): Promise<ReadingView | null> {
  const reading = (await latestReadings(studyId)).find((found) => found.part === part);
  if (!reading) return null;
  const user = await User.findByPk(reading.userId, { attributes: ['id', 'name'] });
  return {
    sentence: reading.sentence,
    reader: { id: reading.userId, name: user?.name ?? 'Somebody' },
    at: reading.createdAt.toISOString(),
    revision: reading.revision,
    isStale: reading.fingerprint !== inputsFingerprint(part, question, content)
  };
}
