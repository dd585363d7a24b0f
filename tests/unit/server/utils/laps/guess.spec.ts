import { describe, expect, it } from 'vitest'
import { guessColumns, knownNames } from '../../../../../server/utils/laps/guess'
import { columnChoiceSchema } from '../../../../../shared/schemas/logs'

/** Guesses of columns given as header and values. */
function guess(columns: Readonly<Record<string, readonly string[]>> | readonly [string, readonly string[]][]) {
  const entries = Array.isArray(columns) ? columns as [string, readonly string[]][] : Object.entries(columns)
  return guessColumns(entries.map(([source, values], index) => ({ index, source, unitText: '', values })), '.', true)
}

function one(header: string, values: readonly string[] = ['1.5', '2.5']) {
  const { channel, unit, confidence } = guess({ [header]: values })[0]!
  return [channel, unit, confidence]
}

describe('the needed three', () => {
  it.each([
    'time_s', 'Time (s)', 'Elapsed Time [sec]', 't [s]', 'GPS_Time_s', 'seconds', 'timeS', 'TIME (seconds)', 'log_time_s',
  ])('%s is the time in seconds', (header) => {
    expect(one(header)).toEqual(['time', 's', 'sure'])
  })

  it.each(['time_ms', 'Timestamp (ms)', 'millis', 'elapsedMs'])('%s is the time in milliseconds', (header) => {
    expect(one(header, ['0', '40'])).toEqual(['time', 'ms', 'sure'])
  })

  it.each(['Time', 'UTC', 'timestamp', 'Date Time', 'Time (UTC)', 'gps_utc_time'])('%s with written times is ISO 8601', (header) => {
    expect(one(header, ['2026-05-09T10:15:00.0Z', '2026-05-09T10:15:00.1Z'])).toEqual(['time', 'ISO 8601', 'sure'])
  })

  it.each(['Latitude', 'lat', 'LAT', 'GPS Lat', 'gps_latitude', 'latitude_deg', 'Lat (°)', 'Latitude [deg]', 'PosLat', 'Latitude (WGS84)', 'GPSLatitude', 'Breitengrad'])('%s is the latitude', (header) => {
    expect(one(header, ['54.4', '54.5'])).toEqual(['latitude', '°', 'sure'])
  })

  it.each(['Longitude', 'lon', 'lng', 'Long', 'GPS Long', 'gps_longitude', 'longitude_deg', 'Lon (°)', 'Längengrad'])('%s is the longitude', (header) => {
    expect(one(header, ['-2.9', '-2.8'])).toEqual(['longitude', '°', 'sure'])
  })

  it('takes the time that rises where several columns tell it', () => {
    const guesses = guess({
      'GPS time': ['10.0', '10.0', '11.0', '11.0'],
      'Elapsed': ['0.0', '0.5', '1.0', '1.5'],
      'Date': ['2026-05-09', '2026-05-09', '2026-05-09', '2026-05-09'],
    })
    expect(guesses.map(({ channel }) => channel)).toEqual(['gps_time', 'time', null])
  })

  it('takes rising written times for the time where no column is named so', () => {
    const [column] = guess({ when: ['2026-05-09T10:15:00Z', '2026-05-09T10:15:01Z'] })
    expect(column).toMatchObject({ channel: 'time', unit: 'ISO 8601', confidence: 'likely' })
  })

  it('says that a latitude beyond 90 is doubtful', () => {
    const [column] = guess({ lat: ['5424.12', '5424.13'] })
    expect(column).toMatchObject({ channel: 'latitude', confidence: 'likely' })
    expect(column!.reason).toContain('decimal degrees')
  })
})

describe('names too short to mean anything by themselves', () => {
  it('are recognised where a unit stands with them', () => {
    expect(one('V (mph)')).toEqual(['speed', 'mph', 'sure'])
    expect(one('v [km/h]')).toEqual(['speed', 'km/h', 'sure'])
    expect(one('Uhr [s]')).toEqual(['time', 's', 'sure'])
    expect(one('V (V)')[0]).not.toBe('speed')
  })
})

describe('units', () => {
  it.each([
    ['Speed (km/h)', 'speed', 'km/h'], ['speed [mph]', 'speed', 'mph'], ['speed_mps', 'speed', 'm/s'], ['speed_km_h', 'speed', 'km/h'],
    ['GPS Speed (knots)', 'speed', 'kn'], ['acc_x_g', 'longitudinal_acceleration', 'g'], ['AccelY (m/s²)', 'lateral_acceleration', 'm/s2'],
    ['lat_g', 'lateral_acceleration', 'g'], ['Long (g)', 'longitudinal_acceleration', 'g'], ['Yaw rate (deg/s)', 'yaw_rate', '°/s'],
    ['Engine RPM', 'rpm', '1/min'], ['RPM', 'rpm', '1/min'], ['Throttle (%)', 'throttle', '%'], ['brake (bar)', 'brake_pressure', 'bar'],
    ['brake_pct', 'brake', '%'], ['Oil (psi)', 'oil_pressure', 'psi'], ['oilPressureKPa', 'oil_pressure', 'kPa'],
    ['Water temp (°F)', 'coolant_temperature', '°F'], ['Battery V', 'battery_voltage', 'V'], ['Steering angle [rad]', 'steering', 'rad'],
    ['Gear', 'gear', ''], ['Satellites', 'satellites', ''], ['Altitude (ft)', 'altitude', 'ft'], ['Heading', 'course', '°'],
  ])('%s is %s in %s', (header, channel, unit) => {
    expect(one(header)).toEqual([channel, unit, 'sure'])
  })

  it('are a guess, and said to be, where the header states none', () => {
    const [column] = guess({ 'Lateral acceleration': ['0.2', '-1.1'] })
    expect(column).toMatchObject({ channel: 'lateral_acceleration', unit: 'g', confidence: 'likely' })
    expect(column!.reason).toContain('guess')
  })

  it('come from the units row before the header', () => {
    const columns = [{ index: 0, source: 'Speed', unitText: 'mph', values: ['50'] }, { index: 1, source: 'Fuel', unitText: 'l', values: ['20'] }]
    expect(guessColumns(columns, '.', true)).toMatchObject([
      { channel: 'speed', unit: 'mph', confidence: 'sure' }, { channel: 'fuel', unit: 'l', confidence: 'unknown' },
    ])
  })

  it('that cannot be converted keep a column from a known channel', () => {
    expect(one('Speed (furlong/h)')).toEqual(['speed_furlong_h', 'furlong/h', 'unknown'])
    expect(one('Yaw (°)')).toEqual(['yaw', '°', 'unknown'])
  })

  it('of a speed are told by the position', () => {
    const metres = (i: number) => 25 * i / 111_195
    const rows = Array.from({ length: 60 }, (_, i) => i)
    const columns = { time_s: rows.map(String), lat: rows.map(i => (54.4 + metres(i)).toFixed(8)), lon: rows.map(() => '-2.9') }
    // 25 m/s is 55.92 mph (NIST SP 811, B.8: 1 mi/h = 0.44704 m/s).
    expect(guess({ ...columns, speed: rows.map(() => '55.92') }).at(-1)).toMatchObject({ unit: 'mph', confidence: 'likely' })
    expect(guess({ ...columns, speed: rows.map(() => '25') }).at(-1)).toMatchObject({ unit: 'm/s', confidence: 'likely' })
  })
})

describe('other columns', () => {
  it('keep their own name as a slug, and their unit', () => {
    expect(one('Damper travel, front left (mm)')).toEqual(['damper_travel_front_left', 'mm', 'unknown'])
    expect(one('fuel_pressure_psi')).toEqual(['fuel_pressure', 'psi', 'unknown'])
    expect(one('sensor_v')).toEqual(['sensor_v', '', 'unknown'])
    expect(one('4WD')).toEqual(['column_4wd', '', 'unknown'])
  })

  it('of text stay in the file', () => {
    expect(one('Driver', ['Ada', 'Ada'])).toEqual([null, '', 'unknown'])
    expect(one('Latitude', ['north', 'north'])).toEqual([null, '', 'unknown'])
  })

  it('without name and values are passed over', () => {
    expect(one('', ['', ''])).toEqual([null, '', 'unknown'])
    expect(one('', ['1', '2'])).toEqual(['column', '', 'unknown'])
  })

  it('never make a channel twice, and the first of a name is recognised', () => {
    const values = ['1', '2']
    const guesses = guess([['speed_kmh', values], ['speed_kmh', values], ['Speed', values], ['fuel', values], ['Fuel', values], ['', values], ['', values]])
    expect(guesses.map(({ channel }) => channel)).toEqual(['speed', 'speed_2', 'speed_3', 'fuel', 'fuel_2', 'column', 'column_2'])
    expect(guesses[1]!.reason).toContain('Another column is already Speed')
  })

  it('of the receiver go before those of the control unit', () => {
    const values = ['1', '2']
    expect(guess({ 'ECU Speed (km/h)': values, 'GPS Speed (km/h)': values }).map(({ channel }) => channel)).toEqual(['ecu_speed', 'speed'])
  })

  it('are always valid choices', () => {
    const long = 'x'.repeat(200)
    const guesses = guess([[long, ['1']], [long, ['1']], ['日本', ['1']], ['temp (in a unit that is far too long)', ['1']]])
    for (const column of guesses) expect(columnChoiceSchema.safeParse(column).error).toBeUndefined()
    expect(new Set(guesses.map(({ channel }) => channel)).size).toBe(4)
  })
})

describe('knownNames', () => {
  it('counts the cells that name a channel', () => {
    expect(knownNames(['time', 'lat', 'Speed (mph)', 'note', '12'])).toBe(3)
  })
})
