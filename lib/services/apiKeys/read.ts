import type { VerbContext } from '@/lib/services/context';
import { loadApiKey } from './load';
import { presentApiKey } from './present';

export async function readApiKey(context: VerbContext, { params }: { params: { apiKeyId: string } }) {
  return presentApiKey(await loadApiKey(context, params.apiKeyId), context.runtime.now());
}
