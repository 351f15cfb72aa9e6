import { route } from '@/lib/http/route';
import { streamEndpoint } from '@/lib/http/streamEndpoint';
import { eventsAfter } from '@/lib/services/events/list';
import * as contracts from '@/openapi/contracts/record';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: streamEndpoint(contracts.streamEvents, eventsAfter),
});
