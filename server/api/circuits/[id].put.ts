import { circuitBody } from '../../../shared/schemas/circuits'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCircuits } from '../../utils/circuits'

export default defineApiHandler({
  who: { action: 'circuits.write', of: 'circuit' },
  params: idParams,
  body: circuitBody,
  handler: async ({ db, teamId, params, body }) => {
    await db('circuits').where('id', params.id).update({ name: body.name, time_zone: body.timeZone, notes: body.notes })
    return (await readCircuits(db, teamId, params.id))[0]!
  },
})
