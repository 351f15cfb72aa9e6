import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { reinvitePerson } from '@/lib/services/people/reinvite';
import * as contracts from '@/openapi/contracts/people';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.reinvitePerson, reinvitePerson),
});
