import { tileSource } from '../utils/tile-source'

/** Map tiles are the one thing that may come from another host, when an address for them is configured. */
export default defineNitroPlugin((nitro) => {
  const { tileUrl } = useRuntimeConfig().public
  if (!tileUrl) return
  nitro.hooks.hook('nuxt-security:routeRules', (rules) => {
    const headers = rules['/**']?.headers
    const policy = headers ? headers.contentSecurityPolicy : undefined
    if (!policy || typeof policy !== 'object') throw new Error('there is no content security policy to let the map tiles through')
    policy['img-src'] = ['\'self\'', 'data:', 'blob:', tileSource(tileUrl)]
  })
})
