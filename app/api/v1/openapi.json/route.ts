import { publicEndpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import * as contracts from '@/openapi/contracts/hub';
import document from '@/openapi/openapi.json';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: publicEndpoint(contracts.getDocument, async () => document),
});
