import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import LogColumns from '../../components/log/LogColumns.vue'
import type { ColumnMap, LogPreview, PreviewColumn } from '../../shared/schemas/logs'

function column(index: number, source: string, channel: string, unit: string, confidence: PreviewColumn['confidence'] = 'sure'): PreviewColumn {
  return { index, source, channel, unit, firstValues: ['1.5', '2.5', '3.5', '4.5'], confidence, reason: `about ${source}` }
}

const PREVIEW: LogPreview = {
  encoding: 'utf-8', delimiter: ',', headerRow: 1, unitsRow: null, firstDataRow: 2,
  columns: [
    column(0, 'time_s', 'time', 's'), column(1, 'lat', 'latitude', '°'), column(2, 'lon', 'longitude', '°'),
    column(3, 'gps_spd', 'speed', 'm/s', 'likely'), column(4, 'fan', 'fan', '%', 'unknown'),
  ],
}

const mount = (more: { fixed?: boolean, again?: boolean } = {}) => mountSuspended(LogColumns, {
  props: { preview: PREVIEW, earlier: null, again: false, busy: false, problem: null, fixed: false, ...more },
  attachTo: document.body,
})
const select = (page: Awaited<ReturnType<typeof mount>>, i: number, what: string) => page.get(`select[name="columns.${i}.${what}"]`)

describe('LogColumns', () => {
  it('shows what was found, the first values and what each guess rests on', async () => {
    const page = await mount()
    const rows = page.findAll('tbody tr')
    expect(rows).toHaveLength(5)
    expect(rows[3]?.findAll('.sample span').map(value => value.text())).toEqual(['1.5', '2.5', '3.5'])
    expect(rows[3]?.text()).toContain('about gps_spd')
    expect(rows.map(row => row.findAll('.say svg').map(sign => sign.attributes('aria-label')))).toEqual(
      [['in order'], ['in order'], ['in order'], ['please check'], []],
    )
    page.unmount()
  })

  it('hands over the map as it was corrected', async () => {
    const page = await mount()
    await select(page, 3, 'unit').setValue('mph')
    await select(page, 4, 'channel').setValue('')
    await page.get('form').trigger('submit')
    const [[map]] = page.emitted('use') as [[ColumnMap]]
    expect(map.columns.map(each => [each.channel, each.unit])).toEqual(
      [['time', 's'], ['latitude', '°'], ['longitude', '°'], ['speed', 'mph'], [null, '%']],
    )
    expect(page.findAll('tbody tr')[3]?.text()).toContain('Set by hand')
    page.unmount()
  })

  it('refuses two columns of one kind, says so at the second, and goes there', async () => {
    const page = await mount()
    await select(page, 4, 'channel').setValue('speed')
    await page.get('form').trigger('submit')
    expect(page.emitted('use')).toBeUndefined()
    expect(page.findAll('tbody tr')[4]?.text()).toContain('two columns cannot both be speed')
    expect(document.activeElement).toBe(select(page, 4, 'channel').element)
    await select(page, 4, 'channel').setValue('')
    expect(page.text()).not.toContain('two columns cannot both be speed')
    page.unmount()
  })

  it('says which column laps cannot do without', async () => {
    const page = await mount()
    await select(page, 1, 'channel').setValue('')
    await page.get('form').trigger('submit')
    expect(page.emitted('use')).toBeUndefined()
    expect(page.get('.complaint').text()).toContain('no column is marked as latitude')
    page.unmount()
  })

  it('lets those look who may not change', async () => {
    const page = await mount({ fixed: true })
    expect(page.findAll('select:not([disabled])')).toHaveLength(0)
    expect(page.find('button').exists()).toBe(false)
    page.unmount()
  })
})
