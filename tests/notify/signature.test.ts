import { randomBytes } from 'node:crypto';
import { Webhook } from 'standardwebhooks';
import { describe, expect, it } from 'vitest';
import { seal, unseal } from '@/lib/access/seal';
import { bodyOf, messageOf } from '@/lib/notify/message';
import { newSigningSecret, signedHeaders } from '@/lib/notify/signature';
import { systemRuntime } from '@/lib/runtime';

describe('a signature', () => {
  it('is that of the vector which the libraries of the Standard Webhooks specification are tested with', () => {
    const headers = signedHeaders(
      {
        id: 'msg_p5jXN8AQM9LWM0D4loKWxJek',
        at: new Date(1_614_265_330_000),
        body: '{"test": 2432232314}',
      },
      ['whsec_MfKQ9r8GKYqrTwjUPD8ILPZIo2LaLaSw'],
    );
    expect(headers).toEqual({
      'webhook-id': 'msg_p5jXN8AQM9LWM0D4loKWxJek',
      'webhook-timestamp': '1614265330',
      'webhook-signature': 'v1,g0hM9SsE+OTPJTGt/tmIKtSyZlE3uFJELVlNIOLJ1OE=',
    });
  });

  it('is verified by the specification’s own package, with either secret of an overlap', () => {
    const [old, young, other] = [0, 1, 2].map(() => newSigningSecret(systemRuntime));
    const body = JSON.stringify({ type: 'setup.released', note: 'Größe 3 ″, ≥ 0.02 ft' });
    const headers = signedHeaders({ id: 'a', at: new Date(), body }, [young, old]);
    expect(headers['webhook-signature'].split(' ')).toHaveLength(2);
    for (const secret of [young, old])
      expect(new Webhook(secret).verify(body, headers)).toEqual(JSON.parse(body));
    expect(() => new Webhook(other).verify(body, headers)).toThrow();
    expect(() => new Webhook(young).verify(body.replace('3', '4'), headers)).toThrow();
    expect(() => new Webhook(young).verify(body, { ...headers, 'webhook-id': 'b' })).toThrow();
  });

  it('comes of secrets of 24 to 64 random bytes', () => {
    const secrets = Array.from({ length: 50 }, () => newSigningSecret(systemRuntime));
    expect(new Set(secrets).size).toBe(50);
    for (const secret of secrets) {
      const bytes = Buffer.from(secret.replace(/^whsec_/, ''), 'base64').length;
      expect([bytes >= 24, bytes <= 64, secret.startsWith('whsec_')]).toEqual([true, true, true]);
    }
  });
});

describe('a sealed secret', () => {
  const hub = randomBytes(32).toString('base64url');
  const sealed = seal('whsec_abc', 'webhook/a/b', hub, systemRuntime);

  it('is opened in its place with the hub’s secret, and nowhere else', () => {
    expect(unseal(sealed, 'webhook/a/b', hub)).toBe('whsec_abc');
    expect(() => unseal(sealed, 'webhook/a/c', hub)).toThrow();
    expect(() => unseal(sealed, 'webhook/a/b', `${hub}x`)).toThrow();
    for (let i = 0; i < sealed.length; i++) {
      const changed = Buffer.from(sealed);
      changed[i] ^= 1;
      expect(() => unseal(changed, 'webhook/a/b', hub)).toThrow();
    }
  });

  it('does not show the secret, and is another each time', () => {
    expect(sealed.includes('whsec_abc')).toBe(false);
    expect(seal('whsec_abc', 'webhook/a/b', hub, systemRuntime).equals(sealed)).toBe(false);
  });
});

describe('a message', () => {
  const event = {
    id: '0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44',
    type: 'setup.released',
    subject: 's',
    projectId: null,
    occurredAt: '2031-04-12T13:41:00Z',
    data: { note: 'n' },
  };

  it('holds type, timestamp and the event', () => {
    expect(JSON.parse(bodyOf(messageOf(event)))).toEqual({
      type: 'setup.released',
      timestamp: '2031-04-12T13:41:00Z',
      data: event,
    });
  });

  it('stays under 20 kB whatever the event carries, counted in bytes', () => {
    for (const note of ['ü'.repeat(9000), 'ü'.repeat(20_000), 'x'.repeat(19_700), 'x'.repeat(1e6)]) {
      const body = bodyOf(messageOf({ ...event, data: { note } }));
      expect(Buffer.byteLength(body)).toBeLessThan(20_000);
      const { data } = JSON.parse(body);
      expect({ ...data, data: null }).toEqual({ ...event, data: null });
      expect([{ note }, { omitted: true }]).toContainEqual(data.data);
    }
  });
});
