import { tileSource } from '../utils/tile-source'

/** Map tiles are the one thing that may come from another host, when an address for them is configured. */
export default defineNitroPlugin((nitro) => {
  const { tileUrl } = useRuntimeConfig().public
  if (!tileUrl) return
  nitro.hooks.hook('nuxt-security:routeRules', (rules) => {
    rules['/**'] = { headers: { contentSecurityPolicy: { 'img-src': ['\'self\'', 'data:', 'blob:', tileSource(tileUrl)] } } }
  })
})
