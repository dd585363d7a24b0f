import { circuitSchema } from '../../../shared/schemas/circuits'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCircuits } from '../../utils/circuits'

export default defineApiHandler({
  about: 'One circuit with its layouts.',
  who: { action: 'read', of: 'circuit' },
  params: idParams,
  answer: circuitSchema,
  handler: async ({ db, teamId, params }) => (await readCircuits(db, teamId, params.id))[0]!,
})
