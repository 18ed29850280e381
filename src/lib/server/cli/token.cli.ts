/** `token <e-mail>`: makes an API token for a person of this installation; the token stands alone on the last line. */
import { Email } from '$lib/contracts/people';
import { loadActor } from '../auth/loadActor';
import { mintToken } from '../commands/mintToken';
import { systemContext } from '../context';
import { closeDatabase, pingDatabase, sequelize } from '../db/connection';
import { migrate } from '../db/migrate';
import { User } from '../db/models/User';
import { AppError } from '../errors';

const DAYS = 90;

async function main(): Promise<number> {
  const parsed = Email.safeParse(process.argv[2]);
  if (!parsed.success) {
    console.error('Give the e-mail address of the person: npm run token -- ecologist@quillmere.example');
    return 2;
  }
  await pingDatabase();
  await migrate(sequelize());
  const user = await User.findOne({ where: { email: parsed.data } });
  const actor = user && (await loadActor(user.id, 'system'));
  if (!actor) {
    console.error(
      `Nobody here has the address ${parsed.data}. The administrator can invite them under Settings, Members.`
    );
    return 1;
  }
  const { secret, expiresAt } = await mintToken(systemContext(actor), {
    name: 'made at the command line',
    scope: 'write',
    days: DAYS
  });
  console.log(
    `A token for ${actor.name}, to read and write until ${expiresAt.toISOString().slice(0, 10)}. It is shown only now.`
  );
  console.log(secret);
  return 0;
}

try {
  process.exitCode = await main();
} catch (error) {
  console.error(error instanceof AppError ? error.message : error);
  process.exitCode = 1;
} finally {
  await closeDatabase();
}
