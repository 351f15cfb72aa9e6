import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createPerson } from '@/lib/services/people/create';
import { listPeople } from '@/lib/services/people/list';
import * as contracts from '@/openapi/contracts/people';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listPeople, listPeople),
  post: endpoint(contracts.createPerson, createPerson),
});
