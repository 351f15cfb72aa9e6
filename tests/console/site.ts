import { walk } from '@/tests/examples/walks';
import { newOrganization } from '@/tests/setup/organization';

export interface WalkedSite {
  projectId: string;
  /** ST-1, which passes. */
  setupId: string;
  layer: string;
}

/** An organization on whose hub the example in Node has been walked once. */
export async function walkedOrganization() {
  const organization = await newOrganization();
  return { ...organization, site: await walkOn(organization.hub.url, organization.key) };
}

export async function walkOn(url: string, key: string): Promise<WalkedSite> {
  const { code, out, problem } = await walk('walk', 'node', { HUBTACK_URL: url, HUBTACK_KEY: key });
  if (code !== 0) throw new Error(`The walk ended with ${code}.\n${problem}`);
  return JSON.parse(out.trimEnd().split('\n').at(-1) ?? '');
}
