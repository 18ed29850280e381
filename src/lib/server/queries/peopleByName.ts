import type { PersonName } from '$lib/contracts/views';
import { User } from '../db/models/User';

/** The names behind some ids, as a function that also answers for an account that is gone. */
export async function peopleByName(ids: Iterable<string>): Promise<(id: string) => PersonName> {
  const users = await User.findAll({ where: { id: [...new Set(ids)] }, attributes: ['id', 'name'] });
  const names = new Map(users.map((user) => [user.id, user.name]));
  return (id) => ({ id, name: names.get(id) ?? 'Somebody' });
}
