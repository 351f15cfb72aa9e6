/** Where to go after signing in: a page of this hub that was asked for, and no other place. */
export function nextPath(search: string): string {
  const wanted = new URLSearchParams(search).get('next') ?? '';
  return /^\/(?![/\\])/.test(wanted) ? wanted : '/projects';
}
