import { publicEndpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { withSession } from '@/lib/http/sessionCookie';
import { createOrganization } from '@/lib/services/organizations/create';
import * as contracts from '@/openapi/contracts/hub';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: publicEndpoint(contracts.createOrganization, async (context, input) => {
    const { organization, session } = await createOrganization(context, input);
    return withSession(organization, session);
  }),
});
