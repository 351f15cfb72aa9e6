import { type Sent, send } from '@/tests/api/fixtures/send';
import { oneSetup } from '@/tests/bench/documents';
import { Ledger } from '@/tests/bench/ledger';

/** Sends uploads of one setup each; keeps what it sent, what was answered, and the ledger of both. */
export class Sender {
  readonly ledger = new Ledger();
  /** The first answer to each upload that was answered. */
  readonly answers = new Map<string, Sent>();
  private readonly bodies = new Map<string, Buffer>();

  constructor(
    private readonly projectId: string,
    private readonly key: string,
  ) {}

  path(): string {
    return `/api/v1/projects/${this.projectId}/uploads`;
  }

  headers(id: string): Record<string, string> {
    return {
      Authorization: `Bearer ${this.key}`,
      'Content-Type': 'application/json',
      ...(id.startsWith('key-') ? { 'Idempotency-Key': id } : {}),
    };
  }

  body(id: string): Buffer {
    const body = this.bodies.get(id) ?? oneSetup(id);
    this.bodies.set(id, body);
    return body;
  }

  /** The same id sends the same bytes; one that begins with `key-` comes with an Idempotency-Key, too. */
  async send(hubUrl: string, id: string, body = this.body(id)): Promise<Sent> {
    this.ledger.send(id);
    const answer = await send(hubUrl + this.path(), { headers: this.headers(id), body });
    this.ledger.answer(answer.status, answer.bytes.toString());
    if (!this.answers.has(id)) this.answers.set(id, answer);
    return answer;
  }

  /** Over several connections, one upload after the other, until `next` has no more or its connection breaks off. */
  async sendMany(hubUrl: string, connections: number, next: () => string | null): Promise<void> {
    const one = async () => {
      for (let id = next(); id !== null; id = next()) await this.send(hubUrl, id);
    };
    await Promise.allSettled(Array.from({ length: connections }, one));
  }
}
