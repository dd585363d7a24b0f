import type { Log } from '../shared/schemas/days'
import { waitFor, type Client } from './client'

/**
 * Uploads a log to an outing, takes its columns as they were guessed, and waits until nothing works on it any more.
 * @throws when the upload is refused; a log that cannot be read comes back with the status `refused`
 */
export async function uploadLog(client: Client, outingId: string, fileName: string, bytes: BlobPart): Promise<Log> {
  const sent = await client.upload<{ id: string, status: string, detail?: string }>(`/api/outings/${outingId}/logs`, fileName, bytes)
  if (sent.status !== 201) throw new Error(`the upload of ${fileName} was answered with ${sent.status}: ${sent.body.detail}`)
  if (sent.body.status === 'mapping') await confirmColumns(client, sent.body.id)
  return settled(client, sent.body.id)
}

/** Takes the columns of a log as they were guessed; the worker then reads it. */
export async function confirmColumns(client: Client, logId: string): Promise<void> {
  const { preview } = await client.must<Log>('GET', `/api/logs/${logId}`)
  const columns = preview!.columns.map(({ index, source, channel, unit }) => ({ index, source, channel, unit }))
  await client.must('PUT', `/api/logs/${logId}/columns`, { columns })
}

/** The log once nothing works on it any more. */
export function settled(client: Client, logId: string): Promise<Log> {
  return waitFor('the log', async () => {
    const log = await client.must<Log>('GET', `/api/logs/${logId}`)
    return ['ready', 'no_lines', 'refused'].includes(log.status) ? log : null
  })
}
