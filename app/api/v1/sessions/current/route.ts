import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { withoutSession } from '@/lib/http/sessionCookie';
import { signOut } from '@/lib/services/sessions/signOut';
import * as contracts from '@/openapi/contracts/sessions';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  delete: endpoint(contracts.signOut, async (context) => {
    await signOut(context);
    return withoutSession();
  }),
});
