import { circuitChange, circuitSchema } from '../../../shared/schemas/circuits'
import { idParams } from '../../../shared/schemas/common'
import { defineApiHandler } from '../../utils/api'
import { readCircuits } from '../../utils/circuits'
import { replaceSheet } from '../../utils/versions'

export default defineApiHandler({
  about: 'Replaces what is said of a circuit.',
  who: { action: 'circuits.write', of: 'circuit' },
  params: idParams,
  body: circuitChange,
  answer: circuitSchema,
  handler: async ({ db, teamId, params, body }) => {
    const columns = { name: body.name, time_zone: body.timeZone, notes: body.notes }
    await replaceSheet(db, 'circuits', params.id, body.basedOnVersion, columns)
    return (await readCircuits(db, teamId, params.id))[0]!
  },
})
