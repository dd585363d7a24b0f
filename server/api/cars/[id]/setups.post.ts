import { idParams, numberedSchema } from '../../../../shared/schemas/common'
import { setupBody } from '../../../../shared/schemas/setups'
import { defineApiHandler } from '../../../utils/api'
import { lockNumbers } from '../../../utils/db/transactions'

export default defineApiHandler({
  about: 'A new setup revision of the car.',
  who: { action: 'setups.write', of: 'car' },
  params: idParams,
  body: setupBody,
  status: 201,
  answer: numberedSchema,
  handler: async ({ db, teamId, params, body, person }) => {
    await lockNumbers(db, params.id)
    const { last } = await db('setup_revisions').where('car_id', params.id).max('number as last').first() as { last: number | null }
    const [row] = await db('setup_revisions')
      .insert({
        team_id: teamId,
        car_id: params.id,
        number: (last ?? 0) + 1,
        name: body.name,
        based_on_id: body.basedOnId,
        sheet: JSON.stringify(body.sheet),
        created_by: person.id,
      })
      .returning<{ id: string, number: number }[]>(['id', 'number'])
    return row!
  },
})
