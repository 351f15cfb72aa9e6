import { expect, it } from 'vitest';
import { setupItem } from '@/tests/bench/documents';
import { newSite } from '@/tests/bench/site';
import { newOrganization } from '@/tests/setup/organization';

const UNITS = { length: 'ft', angle: 'dms', temperature: 'F', pressure: 'inHg' };
/** The most that a document may hold. */
const SETUPS = 1000;

it('an upload of a thousand setups is taken whole', async () => {
  const { hub, key } = await newOrganization();
  const site = await newSite(hub.url, key, 'Large');
  const setups = Array.from({ length: SETUPS }, (_, i) => setupItem(`st-${i}`, i + 1));
  const response = await fetch(`${site.url}/uploads`, {
    method: 'POST',
    headers: { Authorization: `Bearer ${key}`, 'Content-Type': 'application/json' },
    body: JSON.stringify({ clientId: 'large', units: UNITS, setups }),
  });
  const { upload } = (await response.json()) as { upload: { counts: object } };
  expect([response.status, upload.counts]).toEqual([201, { accepted: SETUPS, refused: 0 }]);
}, 60_000);
