import { recordAudit } from '../audit/record';
import type { Context } from '../context';
import { User } from '../db/models/User';
import { withTransaction } from '../db/transaction';
import { refusal } from '../errors';
import { authorize, requireActor } from '../policies/ability';

/** Changes the name by which others see the person. */
export async function updateProfile(context: Context, { name }: { name: string }): Promise<void> {
  const { userId } = requireActor(context.actor);
  authorize(context.actor, 'token.manage', { kind: 'token', userId });
  await withTransaction(async (transaction) => {
    const user = await User.findByPk(userId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!user) throw refusal('auth.required');
    const before = user.name;
    if (before === name) return;
    await user.update({ name }, { transaction });
    await recordAudit(context, transaction, {
      act: 'profile.edit',
      subjectType: 'user',
      subjectId: userId,
      details: { name: { before, after: name } }
    });
  });
}
