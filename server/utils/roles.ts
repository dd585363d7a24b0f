import process from 'node:process'

export type ProcessRole = 'web' | 'worker'

/** What this process does, from LAPWRIGHT_ROLES: `web`, `worker` or `web,worker`; web when not said. */
export function roles(): ProcessRole[] {
  const named = (process.env.LAPWRIGHT_ROLES ?? 'web').split(',').map(role => role.trim()).filter(Boolean)
  const unknown = named.find(role => role !== 'web' && role !== 'worker')
  if (unknown || !named.length) throw new Error(`LAPWRIGHT_ROLES is "${named.join(',')}"; it takes web, worker or web,worker.`)
  return named as ProcessRole[]
}
