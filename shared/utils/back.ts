/**
 * The page to go back to after signing in, from a query that anybody can write: only a path of this site, never another
 * host (`//host`, `/\host`) and never the sign-in page again.
 * @returns the path, or `/days`
 */
export function safeBack(value: unknown): string {
  if (typeof value !== 'string' || !/^\/(?![/\\])/.test(value)) return '/days'
  // Control characters are dropped by browsers when they read an address: "/\t/host" is "//host".
  // eslint-disable-next-line no-control-regex
  if (/[\u0000-\u001F\\]/.test(value) || /^\/(sign-in|register)\b/.test(value) || value === '/') return '/days'
  return value
}
