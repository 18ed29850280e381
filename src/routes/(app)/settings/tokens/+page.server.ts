import { MintToken, NamedRow } from '$lib/contracts/people';
import { mintToken } from '$lib/server/commands/mintToken';
import { revokeToken } from '$lib/server/commands/revokeToken';
import { asAction, asFormAction, emptyForm } from '$lib/server/kit/asAction';
import { asLoad } from '$lib/server/kit/asLoad';
import { readFields } from '$lib/server/kit/readFields';
import { ownTokens } from '$lib/server/queries/ownTokens';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = asLoad(async (_event, context) => ({
  tokens: await ownTokens(context),
  form: await emptyForm(MintToken)
}));

export const actions: Actions = {
  mint: asFormAction(MintToken, async (form, _event, context) => {
    const { secret } = await mintToken(context, { ...form.data, days: Number(form.data.days) });
    return { form, secret };
  }),
  revoke: asAction(async ({ request }, context) => {
    const { id } = await readFields(request, NamedRow);
    await revokeToken(context, id);
  })
};
