import { logSchema } from '../../../../shared/schemas/days'
import { idParams } from '../../../../shared/schemas/common'
import { columnMapSchema, type LogPreview } from '../../../../shared/schemas/logs'
import { defineApiHandler } from '../../../utils/api'
import { sendJob } from '../../../utils/jobs'
import { readLog } from '../../../utils/logs'
import { ProblemError } from '../../../utils/problems'

export default defineApiHandler({
  about: 'What the columns of a log are; it is then read. Remembered for files with the same header.',
  who: { action: 'logs.write', of: 'log' },
  params: idParams,
  body: columnMapSchema,
  status: 202,
  answer: logSchema,
  handler: async ({ db, teamId, params, body }) => {
    const log = await db('logs').where('id', params.id).forUpdate()
      .first<{ status: string, preview: LogPreview | null }>('status', 'preview')
    if (!log.preview || ['uploading', 'queued', 'processing'].includes(log.status)) {
      throw new ProblemError(409, 'Being read', 'The log is being read at this moment. Wait until it is done, then change its columns.')
    }
    const known = new Map(log.preview.columns.map(column => [column.index, column.source]))
    const stranger = body.columns.findIndex(column => known.get(column.index) !== column.source)
    if (stranger >= 0) {
      const message = 'The file has no such column.'
      throw new ProblemError(422, 'Not a column of this file', message, { errors: [{ path: `columns.${stranger}.source`, message }] })
    }
    await db('logs').where('id', params.id).update({ column_map: JSON.stringify(body), status: 'queued', problem: null, remembered: false, restarted: false })
    await sendJob(db, 'log-read', { teamId, logId: params.id })
    return readLog(db, params.id)
  },
})
