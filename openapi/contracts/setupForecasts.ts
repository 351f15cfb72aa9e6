import { contract } from '@/openapi/contract';
import { ProjectParams } from '@/openapi/params';
import { SetupForecastRequest, SetupForecasts } from '@/openapi/schemas/setupForecast';

export const forecastSetups = contract({
  id: 'forecastSetups',
  method: 'post',
  path: '/projects/{projectId}/setup-forecasts',
  tag: 'Setups',
  summary: 'Forecast setups before anybody walks there',
  description:
    'What a free station would be good for at candidate places or over a grid: error ellipse, height, orientation, accuracy at work, weakest mark, smallest detectable blunder, and what the tolerance class would say of the geometry alone. It is the hub’s own adjustment of errorless shots from there. It writes nothing, and does not know what stands between a place and a mark.',
  access: 'setups:read',
  params: ProjectParams,
  body: { json: SetupForecastRequest },
  answers: { 200: { description: 'The forecasts, the best first.', json: SetupForecasts } },
});
