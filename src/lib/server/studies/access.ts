import type { Transaction } from 'sequelize';
import type { Actor, Context } from '../context';
import { Study } from '../db/models/Study';
import { StudyRevision } from '../db/models/StudyRevision';
import { StudyShare } from '../db/models/StudyShare';
import { refusal } from '../errors';
import { isUuid } from '../isUuid';
import { abilitiesOf, authorize, can, requireActor, type StudyAct, type StudySubject } from '../policies/ability';

export interface OpenStudy {
  study: Study;
  actor: Actor;
  subject: StudySubject;
  abilities: StudyAct[];
}

interface OpenOptions {
  transaction?: Transaction;
  /** Hold the row until the transaction ends, so that two writers queue. */
  lock?: boolean;
  /** Look among the deleted instead of the living. */
  deleted?: boolean;
  /** Who opened the thread in question, for `study.resolve`. */
  openerId?: string;
}

/**
 * Finds a study and checks that the actor may do the act to it: the one door through which every command and query on a
 * study goes. Throws 401 when nobody is signed in, 404 when there is none or it may not be read, 403 otherwise.
 */
export async function openStudy(
  context: Context,
  studyId: string,
  act: StudyAct,
  options: OpenOptions = {}
): Promise<OpenStudy> {
  const actor = requireActor(context.actor);
  const { transaction } = options;
  const study = isUuid(studyId)
    ? await Study.findByPk(studyId, { transaction, lock: options.lock ? transaction?.LOCK.UPDATE : undefined })
    : null;
  if (!study || (study.deletedAt !== null) !== (options.deleted ?? false)) throw refusal('study.notFound');
  const shares = await StudyShare.findAll({ where: { studyId, userId: actor.userId }, transaction });
  const subject: StudySubject = {
    kind: 'study',
    workspaceId: study.workspaceId,
    ownerId: study.ownerId,
    shares: shares.map(({ userId, role }) => ({ userId, role })),
    openerId: options.openerId ?? null
  };
  // A deleted study can be read by nobody, so that whoever may not bring it back is told that there is none.
  if (options.deleted && !can(actor, act, subject)) throw refusal('study.notFound');
  authorize(actor, act, subject);
  return { study, actor, subject, abilities: abilitiesNow(abilitiesOf(actor, subject), study.state) };
}

const CHANGING: readonly StudyAct[] = ['study.edit', 'study.comment', 'study.resolve', 'study.archive'];

/** The acts open now: an archived study is read, copied, exported and restored, but not changed. */
export function abilitiesNow(abilities: readonly StudyAct[], state: Study['state']): StudyAct[] {
  return abilities.filter((act) => (state === 'archived' ? !CHANGING.includes(act) : act !== 'study.restore'));
}

/** Throws where the study was deleted or archived since it was opened. Call on a row that is locked. */
export function requireLiving(study: Study): void {
  if (study.deletedAt !== null) throw refusal('study.notFound');
  requireOpen(study);
}

/** Throws 409 where the study is archived. Call after authorisation, so that an outsider learns nothing. */
export function requireOpen(study: Study): void {
  if (study.state === 'archived') throw refusal('study.archived');
}

/** One revision of a study, by default the latest. Throws 404 where there is none of that number. */
export async function readRevision(
  study: Study,
  number = study.revision,
  transaction?: Transaction
): Promise<StudyRevision> {
  const isNumber = Number.isInteger(number) && number > 0 && number <= study.revision;
  const found = isNumber ? await StudyRevision.findOne({ where: { studyId: study.id, number }, transaction }) : null;
  if (!found) throw refusal('study.notFound', { message: `This study has no revision ${number}.` });
  return found;
}
