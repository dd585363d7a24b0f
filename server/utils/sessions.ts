import process from 'node:process'
import type { H3Event } from 'h3'

/**
 * Starts (or goes on with) the session of a person. The cookie is marked secure when people reach the server by https;
 * a browser would not send it back over plain http on loopback.
 */
export async function startSession(event: H3Event, userId: string, epoch: number): Promise<void> {
  await replaceUserSession(event, { user: { id: userId }, epoch }, { cookie: cookie() })
}

/** Ends the session of this browser. */
export async function endSession(event: H3Event): Promise<void> {
  await clearUserSession(event, { cookie: cookie() })
}

function cookie() {
  const secure = (process.env.LAPWRIGHT_PUBLIC_URL ?? '').startsWith('https:')
  return { secure, sameSite: 'lax', httpOnly: true } as const
}
