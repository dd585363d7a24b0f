import type { Channel } from './laps/types'
import type { Transaction } from './db/transactions'

/** Writes all channels of a log, in the order given. */
export async function writeChannels(
  db: Transaction,
  teamId: string,
  logId: string,
  channels: readonly Channel[],
): Promise<void> {
  await db('channels').where({ team_id: teamId, log_id: logId }).delete()
  for (const [ordinal, channel] of channels.entries()) {
    const { samples } = channel
    await db('channels').insert({
      team_id: teamId,
      log_id: logId,
      name: channel.name,
      ordinal,
      label: channel.label,
      unit: channel.unit,
      rate_hz: channel.rateHz,
      encoding: samples instanceof Float64Array ? 'f64' : 'f32',
      samples: Buffer.from(samples.buffer, samples.byteOffset, samples.byteLength),
    })
  }
}

interface ChannelRow {
  name: string
  label: string
  unit: string
  rate_hz: number
  encoding: 'f64' | 'f32'
  samples: Buffer
}

/**
 * Channels of a log by name, whole or a slice of their samples. PostgreSQL reads a slice without reading the rest,
 * since samples are stored uncompressed.
 * @param slice first sample and how many, counted from 0
 */
export async function readChannels(
  db: Transaction,
  teamId: string,
  logId: string,
  names: readonly string[],
  slice?: { first: number, count: number },
): Promise<Map<string, Channel>> {
  const size = '(case encoding when \'f64\' then 8 else 4 end)'
  const samples = slice
    ? db.raw(`substring(samples from ?::int * ${size} + 1 for ?::int * ${size}) as samples`, [slice.first, slice.count])
    : 'samples'
  const rows = await db('channels').where({ team_id: teamId, log_id: logId }).whereIn('name', names).orderBy('ordinal')
    .select<ChannelRow[]>('name', 'label', 'unit', 'rate_hz', 'encoding', samples)
  return new Map(rows.map(row => [row.name, channelOf(row)]))
}

function channelOf(row: ChannelRow): Channel {
  return { name: row.name, label: row.label, unit: row.unit, rateHz: row.rate_hz, samples: decode(row) }
}

/** Little-endian bytes as typed numbers; copied, since a Buffer of the driver may lie at any offset. */
function decode(row: ChannelRow): Float64Array | Float32Array {
  const bytes = Uint8Array.from(row.samples).buffer
  return row.encoding === 'f64' ? new Float64Array(bytes) : new Float32Array(bytes)
}
