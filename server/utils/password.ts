import type { H3Event } from 'h3'
import type { ShortTransaction } from './api'
import { countPasswordAttempt } from './limits'
import { ProblemError } from './problems'

/**
 * Sees that a signed-in person knows their password; counts as an attempt at it. Hashing takes long, so no transaction
 * waits for it.
 * @param field where the password was typed, for the message
 * @throws {ProblemError} 422 when it is not the one; 429 when there were too many wrong ones
 */
export async function checkPassword(
  event: H3Event,
  transaction: ShortTransaction,
  userId: string,
  field: { path: string, typed: string },
): Promise<void> {
  const { rows: [held] } = await transaction(db => db.raw<{ rows: { email: string, hash: string }[] }>(
    'select email, app.my_password_hash() as hash from users where id = ?', [userId]))
  const attempt = await countPasswordAttempt(event, held!.email)
  if (!await verifyPassword(held!.hash, field.typed)) {
    const message = 'This is not your present password.'
    throw new ProblemError(422, 'The password is not right', message, { errors: [{ path: field.path, message }] })
  }
  await attempt.giveBack()
}
