/**
 * The source that the content security policy must allow for map tiles: the origin of their address, with all its
 * subdomains where the address names them by `{s}`.
 */
export function tileSource(tileUrl: string): string {
  const { protocol, host } = new URL(tileUrl.replace('{s}.', ''))
  return `${protocol}//${tileUrl.includes('{s}.') ? '*.' : ''}${host}`
}
