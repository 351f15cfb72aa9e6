import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { forecastSetups } from '@/lib/services/setupForecasts/forecast';
import * as contracts from '@/openapi/contracts/setupForecasts';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.forecastSetups, forecastSetups),
});
