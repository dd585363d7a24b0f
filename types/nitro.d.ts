declare module '#nitro-internal-virtual/server-handlers' {
  import type { EventHandler } from 'h3'

  /** Every route of the server as Nitro found it; `lazy` handlers are read at their first request. */
  export const handlers: {
    route: string
    method?: string
    lazy: boolean
    middleware: boolean
    handler: EventHandler
  }[]
}
