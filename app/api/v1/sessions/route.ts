import { publicEndpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { withSession } from '@/lib/http/sessionCookie';
import { signIn } from '@/lib/services/sessions/signIn';
import * as contracts from '@/openapi/contracts/sessions';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: publicEndpoint(contracts.signIn, async (context, input) => {
    const session = await signIn(context, input);
    return withSession(session.whoami, session);
  }),
});
