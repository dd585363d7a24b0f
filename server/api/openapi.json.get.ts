import { handlers } from '#nitro-internal-virtual/server-handlers'
import { version } from '../../package.json'
import { openApiSchema } from '../../shared/schemas/common'
import { defineApiHandler, type DescribedHandler } from '../utils/api'
import { openApiDocument, type DescribedRoute } from '../utils/openapi'

let made: Promise<Record<string, unknown>> | undefined

/** Reads every route once, to ask what it says of itself. */
async function describeAll(): Promise<Record<string, unknown>> {
  const routes: DescribedRoute[] = []
  for (const { route: path, method, handler, lazy } of handlers) {
    // The catch-all is no route to be asked for.
    if (!method || !path.startsWith('/api/')) continue
    // The list holds what brings a lazy handler, and not yet the handler that h3 makes of it.
    const found = lazy ? (await (handler as () => Promise<{ default: unknown }>)()).default : handler
    const { route } = found as Partial<DescribedHandler>
    if (route) routes.push({ path, method: method.toLowerCase(), route })
  }
  return openApiDocument(routes, version)
}

export default defineApiHandler({
  about: 'This description of the interface, as OpenAPI 3.1.',
  who: 'anyone',
  answer: openApiSchema,
  handler: () => made ??= describeAll(),
})
