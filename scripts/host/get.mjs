import { get as httpGet } from 'node:http';

/** Asks once over a connection of its own: one kept open would make the web process wait for it when it drains. */
export function get(url, headers = {}) {
  return new Promise((resolve, reject) => {
    const request = httpGet(url, { agent: false, headers, timeout: 10_000 }, async (response) => {
      try {
        const text = Buffer.concat(await response.toArray()).toString('utf8');
        resolve({ status: response.statusCode, text });
      } catch (error) {
        reject(error);
      }
    });
    request.once('timeout', () => request.destroy(new Error('no answer within 10 seconds')));
    request.once('error', reject);
  });
}
