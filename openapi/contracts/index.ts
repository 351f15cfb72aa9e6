import type { Contract } from '@/openapi/contract';
import * as adjustments from './adjustments';
import * as apiKeys from './apiKeys';
import * as control from './control';
import * as design from './design';
import * as grade from './grade';
import * as hub from './hub';
import * as instruments from './instruments';
import * as jobs from './jobs';
import * as levelling from './levelling';
import * as people from './people';
import * as projects from './projects';
import * as record from './record';
import * as sessions from './sessions';
import * as setupForecasts from './setupForecasts';
import * as setups from './setups';
import * as uploads from './uploads';
import * as webhooks from './webhooks';

const modules = [
  hub,
  sessions,
  people,
  apiKeys,
  projects,
  instruments,
  control,
  uploads,
  setups,
  setupForecasts,
  design,
  grade,
  levelling,
  adjustments,
  jobs,
  record,
  webhooks,
];

function isContract(value: unknown): value is Contract {
  return typeof value === 'object' && value !== null && 'answers' in value && 'path' in value;
}

/** Every operation of the hub, in the order of the document. */
export const CONTRACTS: readonly Contract[] = modules.flatMap((module) =>
  Object.values(module).filter(isContract),
);
