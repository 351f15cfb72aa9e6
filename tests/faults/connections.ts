import { once } from 'node:events';
import { type Agent, type ClientRequest, get, type IncomingMessage, request } from 'node:http';
import type { Sender } from './sender';

async function responseTo(sent: ClientRequest): Promise<IncomingMessage> {
  const [response] = await once(sent, 'response');
  return response;
}

/** A client's connections to one hub, kept alive, with requests that are begun and not finished. */
export function keptConnections(hubUrl: string, agent: Agent, sender: Sender) {
  const url = hubUrl + sender.path();
  return {
    /** Starts an upload; its last `held` bytes stay behind until `finish`. */
    begin(id: string, held = 0) {
      const body = sender.body(id);
      const upload = request(url, {
        method: 'POST',
        agent,
        headers: {
          ...sender.headers(id),
          'Content-Length': body.byteLength,
          ...(held > 0 ? { Expect: '100-continue' } : {}),
        },
      });
      const answered = responseTo(upload).then(async (response) => {
        const text = (await response.toArray()).join('');
        sender.ledger.answer(response.statusCode!, text);
        return { status: response.statusCode, connection: response.headers.connection };
      });
      // Awaited later, or expected to fail.
      answered.catch(() => undefined);
      sender.ledger.send(id);
      upload.write(body.subarray(0, body.byteLength - held));
      const finish = () => upload.end(body.subarray(body.byteLength - held));
      if (held === 0) finish();
      return { answered, finish, taken: () => once(upload, 'continue') };
    },

    async leaveIdle(): Promise<void> {
      const response = await responseTo(get(`${hubUrl}/api/health/live`, { agent }));
      await response.toArray();
    },

    /** Uploads so many bytes more than it needs, asks for them again, and reads the head of the answer alone. */
    async beginLarge(id: string, more: number) {
      const sent = Buffer.concat([sender.body(id), Buffer.alloc(more, ' ')]);
      const { body } = await sender.send(hubUrl, id, sent);
      const { upload } = body as { upload: { id: string } };
      const response = await responseTo(
        get(`${url}/${upload.id}/raw`, { agent, headers: sender.headers(id) }),
      );
      return { sent, rest: async () => Buffer.concat(await response.toArray()) };
    },
  };
}
