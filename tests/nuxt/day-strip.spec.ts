import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import DayStrip from '../../components/day/DayStrip.vue'
import DayStripHead from '../../components/day/DayStripHead.vue'
import { lapAxis } from '../../shared/lap-axis'
import type { LapFigure } from '../../shared/laps'

function lap(timeS: number, more: Partial<LapFigure> = {}): LapFigure {
  return { kind: 'timed', timeS, sectorsS: [], flags: [], excluded: false, excludedReason: '', ...more }
}

const LAPS = [
  lap(124.2, { kind: 'out' }), lap(92.41), lap(91.204), lap(93.402, { excluded: true, excludedReason: 'traffic, corner 8' }),
  lap(90.869), lap(131, { kind: 'in' }),
]
const MARKS = [{ key: 'best' as const, timeS: 90.869, label: 'best', text: '1:30.869' }]
const AXIS = lapAxis([92.41, 91.204, 90.869], [124.2, 93.402, 131], [90.869])!

describe('DayStrip', () => {
  const mount = (laps = LAPS) => mountSuspended(DayStrip, {
    props: { outingNumber: 1, laps, axis: AXIS, marks: MARKS, width: 520, narrow: false },
  })

  it('draws each lap once, with a sign of its own for what does not count', async () => {
    const strip = await mount()
    expect(strip.findAll('circle.f-ink')).toHaveLength(3)
    expect(strip.findAll('circle.ring')).toHaveLength(2)
    expect(strip.findAll('path.x')).toHaveLength(1)
    expect(strip.text()).toBe('traffic, corner 8')
  })

  it('puts the fastest lap on the line of the best, and out laps behind the break', async () => {
    const strip = await mount()
    const line = strip.get('line.ev-lap').attributes('x1')
    const dots = strip.findAll('circle.f-ink').map(dot => Number(dot.attributes('cx')))
    expect(Math.min(...dots)).toBe(Number(line))
    const rings = strip.findAll('circle.ring').map(ring => Number(ring.attributes('cx')))
    expect(Math.min(...rings)).toBeGreaterThan(Math.max(...dots))
  })

  it('says the same in words', async () => {
    const svg = (await mount()).get('svg')
    expect(svg.attributes('role')).toBe('img')
    expect(svg.attributes('aria-label')).toContain('1:33.402 (traffic, corner 8)')
  })

  it('follows a lap that is put back', async () => {
    const strip = await mount()
    await strip.setProps({ laps: LAPS.map(each => ({ ...each, excluded: false, excludedReason: '' })) })
    expect(strip.findAll('path.x')).toHaveLength(0)
    expect(strip.findAll('circle.f-ink')).toHaveLength(4)
  })
})

describe('DayStripHead', () => {
  it('names the ticks and marks, and where slower laps are', async () => {
    const head = await mountSuspended(DayStripHead, { props: { axis: AXIS, marks: MARKS, width: 520, narrow: false } })
    const texts = head.findAll('text').map(text => text.text())
    expect(texts).toContain('best 1:30.869')
    expect(texts).toContain('1:31')
    expect(texts).toContain('over')
    expect(head.get('svg').attributes('aria-label')).toContain('slower laps stand beyond a break')
  })

  it('has no break when nothing lies beyond the axis', async () => {
    const axis = lapAxis([90, 91], [], [])!
    const head = await mountSuspended(DayStripHead, { props: { axis, marks: [], width: 358, narrow: true } })
    expect(head.findAll('text').map(text => text.text())).not.toContain('over')
  })
})
