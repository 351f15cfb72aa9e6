'use client';

import { useSyncExternalStore } from 'react';
import { timeZone } from '@/app/ui/numbers';

const never = () => () => {};

/** In which zone the times of a page are; known in the browser alone. */
export function Times() {
  const zone = useSyncExternalStore(never, timeZone, () => null);
  return zone === null ? null : `times in ${zone}`;
}
