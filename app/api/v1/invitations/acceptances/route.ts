import { publicEndpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { withSession } from '@/lib/http/sessionCookie';
import { acceptInvitation } from '@/lib/services/sessions/acceptInvitation';
import * as contracts from '@/openapi/contracts/sessions';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: publicEndpoint(contracts.acceptInvitation, async (context, input) => {
    const session = await acceptInvitation(context, input);
    return withSession(session.whoami, session);
  }),
});
