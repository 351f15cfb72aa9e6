import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readSetupAffected } from '@/lib/services/affected/ofSetup';
import * as contracts from '@/openapi/contracts/setups';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getSetupAffected, readSetupAffected),
});
