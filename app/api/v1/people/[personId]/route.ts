import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readPerson } from '@/lib/services/people/read';
import { updatePerson } from '@/lib/services/people/update';
import * as contracts from '@/openapi/contracts/people';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getPerson, readPerson),
  patch: endpoint(contracts.updatePerson, updatePerson),
});
