import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createCalibration } from '@/lib/services/instruments/calibrate';
import * as contracts from '@/openapi/contracts/instruments';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.createCalibration, createCalibration),
});
