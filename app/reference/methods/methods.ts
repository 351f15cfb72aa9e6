import { backsight } from './content/backsight';
import { benchCheck } from './content/benchCheck';
import { checkShots } from './content/checkShots';
import { collimation } from './content/collimation';
import { controlHealth } from './content/controlHealth';
import { distances } from './content/distances';
import { explanations } from './content/explanations';
import { faces } from './content/faces';
import { freeStation } from './content/freeStation';
import { gradeCheck } from './content/gradeCheck';
import { identification } from './content/identification';
import { leaveOneOut } from './content/leaveOneOut';
import { levelRun } from './content/levelRun';
import { lots } from './content/lots';
import { network } from './content/network';
import { partialResection } from './content/partialResection';
import { pegTest } from './content/pegTest';
import { ray } from './content/ray';
import { setupDrift } from './content/setupDrift';
import { setupForecast } from './content/setupForecast';
import { setupVerdict } from './content/setupVerdict';
import { statistics } from './content/statistics';
import { surfaces } from './content/surfaces';
import { units } from './content/units';
import type { Method } from './method';

/** Every method of computation of the hub, in the order in which a day meets them. */
export const METHODS: readonly Method[] = [
  units,
  distances,
  ray,
  faces,
  collimation,
  freeStation,
  partialResection,
  identification,
  backsight,
  statistics,
  leaveOneOut,
  setupVerdict,
  checkShots,
  setupDrift,
  explanations,
  setupForecast,
  levelRun,
  pegTest,
  network,
  controlHealth,
  surfaces,
  gradeCheck,
  lots,
  benchCheck,
];
