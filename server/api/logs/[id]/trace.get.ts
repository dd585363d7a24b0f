import { traceSchema } from '../../../../shared/schemas/logs'
import { idParams } from '../../../../shared/schemas/common'
import { defineApiHandler } from '../../../utils/api'
import { readPath } from '../../../utils/cut-work'
import { ProblemError } from '../../../utils/problems'

const MOST_POINTS = 6000

export default defineApiHandler({
  about: 'The driven path of a log for drawing, thinned to some thousand points.',
  who: { action: 'read', of: 'log' },
  params: idParams,
  answer: traceSchema,
  handler: async ({ db, teamId, params }) => {
    const log = await db('logs').where('id', params.id)
      .first<{ status: string, gaps: { fromS: number, toS: number }[] }>('status', 'gaps')
    if (log.status !== 'ready' && log.status !== 'no_lines') {
      throw new ProblemError(409, 'Not read yet', 'The log has no trace before it has been read.')
    }
    const path = await readPath(db, teamId, params.id, log.gaps)
    const step = Math.max(1, Math.ceil(path.timeS.length / MOST_POINTS))
    const thin = (values: Float64Array, digits: number) => {
      const count = Math.ceil(values.length / step)
      return Array.from({ length: count }, (_, i) => Number(values[i * step]!.toFixed(digits)))
    }
    return {
      timeS: thin(path.timeS, 3),
      latitudeDeg: thin(path.latitudeDeg, 7),
      longitudeDeg: thin(path.longitudeDeg, 7),
      gaps: [...path.gaps],
    }
  },
})
