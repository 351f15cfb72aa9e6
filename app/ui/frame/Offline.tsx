'use client';

import { useSyncExternalStore } from 'react';

function subscribe(change: () => void) {
  window.addEventListener('online', change);
  window.addEventListener('offline', change);
  return () => {
    window.removeEventListener('online', change);
    window.removeEventListener('offline', change);
  };
}

/** Says that what is shown may be old. */
export function Offline() {
  const online = useSyncExternalStore(
    subscribe,
    () => navigator.onLine,
    () => true,
  );
  return (
    <div role="status">
      {online ? null : (
        <p className="mb-5 rounded border border-hold bg-hold-soft px-4 py-2.5 font-medium">
          No connection. What is shown was read before; nothing can be changed until it is back.
        </p>
      )}
    </div>
  );
}
