/** The process answers: nothing else is asked. */
export function GET() {
  return new Response('{"status":"live"}', {
    headers: { 'Content-Type': 'application/json', 'Cache-Control': 'no-store' },
  });
}
