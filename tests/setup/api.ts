import supertest from 'supertest';

/** Requests to a hub with one key. */
export function api(url: string, key?: string) {
  const agent = supertest(`${url}/api/v1`);
  const signed = (test: supertest.Test) => (key ? test.set('Authorization', `Bearer ${key}`) : test);
  return {
    get: (path: string) => signed(agent.get(path)),
    post: (path: string, body?: object) => {
      const test = signed(agent.post(path));
      return body === undefined ? test : test.send(body);
    },
    patch: (path: string, body: object) => signed(agent.patch(path)).send(body),
    delete: (path: string) => signed(agent.delete(path)),
  };
}

export type Api = ReturnType<typeof api>;
