import { isDeepStrictEqual } from 'node:util';
import type { Contract } from '@/openapi/contract';

/**
 * Holds an answer against its contract: right shape, and no field that the contract does not name. A fault here is
 * the hub's own.
 */
export function checkAnswer(operation: Contract, status: number, body: unknown): void {
  const schema = operation.answers[status]?.json;
  if (!schema) throw new Error(`${operation.id} has no answer ${status}.`);
  const sent = JSON.parse(JSON.stringify(body)) as unknown;
  const parsed = schema.safeParse(sent);
  if (!parsed.success) {
    const [issue] = parsed.error.issues;
    throw new Error(
      `${operation.id} answered against its contract at /${issue.path.join('/')}: ${issue.message}`,
    );
  }
  if (!isDeepStrictEqual(parsed.data, sent)) {
    throw new Error(`${operation.id} answered a field that its contract does not name.`);
  }
}
