import { linesBody, savedLinesSchema } from '../../../../shared/schemas/circuits'
import { idParams } from '../../../../shared/schemas/common'
import { defineApiHandler } from '../../../utils/api'
import { readLayout } from '../../../utils/circuits'
import { requestCut } from '../../../utils/cutting'
import { ProblemError } from '../../../utils/problems'

export default defineApiHandler({
  about: 'Replaces all timing lines of a layout; every log driven on it is cut again from its stored channels.',
  who: { action: 'lines.write', of: 'layout' },
  params: idParams,
  body: linesBody,
  answer: savedLinesSchema,
  handler: async ({ db, teamId, params, body }) => {
    const changed = await db('layouts').where({ id: params.id, lines_version: body.basedOnVersion })
      .update({ lines_version: body.basedOnVersion + 1, length_m: null })
    if (!changed) {
      throw new ProblemError(409, 'Changed by somebody else', 'Somebody else has saved other lines for this layout since you opened it. Yours are still here and not saved; open the layout in a second tab to see theirs.')
    }
    await db('timing_lines').where('layout_id', params.id).delete()
    if (body.lines.length) {
      await db('timing_lines').insert(body.lines.map(line => ({
        team_id: teamId,
        layout_id: params.id,
        kind: line.kind,
        ordinal: line.ordinal,
        a_latitude_deg: line.a.latitudeDeg,
        a_longitude_deg: line.a.longitudeDeg,
        b_latitude_deg: line.b.latitudeDeg,
        b_longitude_deg: line.b.longitudeDeg,
      })))
    }
    const recutting = await requestCut(db, teamId, params.id)
    return { ...await readLayout(db, params.id), recutting }
  },
})
