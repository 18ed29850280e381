import type { Transaction } from 'sequelize';
import type { Study } from '../db/models/Study';
import { readRevision } from './access';
import { assess } from './assess';
import { surroundingsOf } from './surroundings';

/** Brings the parts on the list row up to date after a comment or a share, which change no text. */
export async function refreshParts(study: Study, transaction: Transaction): Promise<void> {
  const { question, content } = await readRevision(study, study.revision, transaction);
  const { parts } = assess(question, content, await surroundingsOf(study.id, transaction));
  await study.update({ partStates: parts }, { transaction });
}
