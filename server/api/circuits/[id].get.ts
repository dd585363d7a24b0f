import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCircuits } from '../../utils/circuits'

export default defineApiHandler({
  who: { action: 'read', of: 'circuit' },
  params: idParams,
  handler: async ({ db, teamId, params }) => (await readCircuits(db, teamId, params.id))[0]!,
})
