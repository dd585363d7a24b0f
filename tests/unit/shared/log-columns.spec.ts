import { describe, expect, it } from 'vitest'
import { CHANNELS } from '../../../shared/channels'
import { channelOptions, columnCounts, ownChannelName, startingChoices, unitOptions, withChannel } from '../../../shared/log-columns'
import { columnMapSchema, type LogPreview, type PreviewColumn } from '../../../shared/schemas/logs'

function column(index: number, source: string, channel: string | null, unit = '', confidence: PreviewColumn['confidence'] = 'sure'): PreviewColumn {
  return { index, source, channel, unit, firstValues: ['1'], confidence, reason: 'for a test' }
}

const PREVIEW: LogPreview = {
  encoding: 'utf-8', delimiter: ',', headerRow: 1, unitsRow: null, firstDataRow: 2,
  columns: [
    column(0, 'time_s', 'time', 's'), column(1, 'lat', 'latitude', '°'), column(2, 'lon', 'longitude', '°'),
    column(3, 'gps_spd', 'speed', 'm/s', 'likely'), column(4, 'Fan duty', 'fan_duty', '%', 'unknown'), column(5, 'note', null, '', 'unknown'),
  ],
}

describe('ownChannelName', () => {
  const named = (...sources: string[]) => sources.map((source, index) => ({ index, source }))

  it('is a slug of the header that a column map accepts', () => {
    for (const source of ['Fan duty (%)', '2nd probe', '', 'Öl', 'x'.repeat(190)]) {
      const channel = ownChannelName(named(source), 0)
      const columns = ['time', 'latitude', 'longitude', channel].map((name, index) => ({ index, source: name, channel: name, unit: '' }))
      expect(columnMapSchema.safeParse({ columns }).success).toBe(true)
    }
  })

  it('differs between columns with one header, and from names that mean something', () => {
    expect(ownChannelName(named('probe', 'probe'), 0)).toBe('probe')
    expect(ownChannelName(named('probe', 'probe'), 1)).toBe('probe_2')
    expect(ownChannelName(named('Speed'), 0)).toBe('speed_1')
  })
})

describe('choices', () => {
  it('begins with the guesses, or with what was chosen before', () => {
    expect(startingChoices(PREVIEW, null)[3]).toEqual({ index: 3, source: 'gps_spd', channel: 'speed', unit: 'm/s' })
    const earlier = { columns: [{ index: 3, source: 'gps_spd', channel: 'speed', unit: 'km/h' }] }
    expect(startingChoices(PREVIEW, earlier)[3]?.unit).toBe('km/h')
    expect(startingChoices(PREVIEW, { columns: [{ index: 3, source: 'other', channel: null, unit: '' }] })[3]?.channel).toBe('speed')
  })

  it('offers every known channel, the own name and leaving out, each once', () => {
    for (const each of PREVIEW.columns) {
      const values = channelOptions(PREVIEW.columns, each).map(option => option.value)
      expect(new Set(values).size).toBe(values.length)
      expect(values.length).toBe(CHANNELS.length + 2)
      expect(values).toContain(each.channel ?? '')
    }
  })

  it('takes the unit along when the new channel knows it, else gives its first', () => {
    const [guess] = [PREVIEW.columns[3]!]
    const choice = startingChoices(PREVIEW, null)[3]!
    expect(withChannel(choice, 'throttle', guess)).toMatchObject({ channel: 'throttle', unit: '%' })
    expect(withChannel({ ...choice, unit: 'g' }, 'lateral_acceleration', guess).unit).toBe('g')
    expect(withChannel(choice, null, guess)).toMatchObject({ channel: null, unit: 'm/s' })
    expect(unitOptions('fan_duty')).toBeNull()
    expect(unitOptions('gear')).toEqual([{ value: '', label: 'none' }])
  })

  it('counts what is used and which guesses want a look, until they are set by hand', () => {
    const choices = startingChoices(PREVIEW, null)
    expect(columnCounts(PREVIEW, choices)).toEqual({ used: 4, kept: 1, total: 6, doubtful: 1, missing: [] })
    const corrected = choices.map(choice => choice.index === 3 ? { ...choice, unit: 'mph' } : choice)
    expect(columnCounts(PREVIEW, corrected).doubtful).toBe(0)
    const without = choices.map(choice => choice.channel === 'latitude' ? { ...choice, channel: null } : choice)
    expect(columnCounts(PREVIEW, without).missing).toEqual(['latitude'])
  })
})
