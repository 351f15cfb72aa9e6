import { isReady } from '@/lib/http/ready';

/** The database answers and durability is what was promised. */
export async function GET() {
  const ready = await isReady();
  return new Response(JSON.stringify({ status: ready ? 'ready' : 'unavailable' }), {
    status: ready ? 200 : 503,
    headers: {
      'Content-Type': 'application/json',
      'Cache-Control': 'no-store',
      ...(ready ? {} : { 'Retry-After': '2' }),
    },
  });
}
