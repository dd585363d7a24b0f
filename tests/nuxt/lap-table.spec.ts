import { mountSuspended, registerEndpoint } from '@nuxt/test-utils/runtime'
import { flushPromises } from '@vue/test-utils'
import { readBody } from 'h3'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import LapTable from '../../components/lap/LapTable.vue'
import { FIRST_PREFERENCES } from '../../shared/schemas/people'
import type { Lap } from '../../shared/schemas/days'
import { useSessionStore } from '../../stores/session'

const ID = (n: number) => `01890000-0000-7000-8000-00000000000${n}`

function lap(number: number, sectorsS: number[], more: Partial<Lap> = {}): Lap {
  const timeS = sectorsS.reduce((sum, sector) => sum + sector, 0)
  return { id: ID(number), number, logId: null, kind: 'timed', startS: 0, timeS, sectorsS, flags: [], excluded: false, excludedReason: '', ...more }
}

const LAPS = [
  lap(0, [], { kind: 'out', timeS: 120 }), lap(1, [46, 45]), lap(2, [45, 45.5]), lap(3, [45.2, 45.6]),
  lap(4, [44, 44], { excluded: true, excludedReason: 'cut corner 2' }),
]

function signIn(role: 'driver' | 'coach') {
  const team = { id: ID(8), name: 'Fell Road Garage', role }
  useSessionStore().me = { id: ID(9), name: 'Nell Placeholder', email: 'nell@lapwright.example', preferences: FIRST_PREFERENCES, teams: [team] }
}

async function mount() {
  const page = await mountSuspended(LapTable, { props: { laps: LAPS }, attachTo: document.body })
  const row = (i: number) => page.findAll('tbody tr:not(.ask)')[i]!
  const tick = (i: number, on = true) => row(i).get('input[type=checkbox]').setValue(on)
  const link = () => page.find('a[href^="/compare"]')
  return { page, row, tick, link }
}

describe('LapTable', () => {
  beforeEach(() => signIn('driver'))

  it('marks the best by a word, not by weight alone, and never an excluded lap', async () => {
    const { page, row } = await mount()
    expect(page.findAll('tbody .time').filter(cell => cell.text().includes('best'))).toHaveLength(1)
    expect(row(2).get('.time').text()).toContain('best 1:30.500')
    expect(row(4).text()).not.toContain('best')
    expect(row(4).text()).toContain('cut corner 2')
    expect(page.get('tfoot .sum').text()).toBe('1:30.000')
    page.unmount()
  })

  it('leads from one ticked lap to the comparison against the best', async () => {
    const { page, tick, link } = await mount()
    expect(link().exists()).toBe(false)
    await tick(1)
    expect(link().attributes('href')).toBe(`/compare?lap=${ID(1)}&against=${ID(2)}`)
    page.unmount()
  })

  it('holds the slower of two against the faster, and lets a third take the place of the first', async () => {
    const { page, row, tick, link } = await mount()
    await tick(3)
    await tick(1)
    expect(link().attributes('href')).toBe(`/compare?lap=${ID(1)}&against=${ID(3)}`)
    await tick(2)
    expect(link().attributes('href')).toBe(`/compare?lap=${ID(1)}&against=${ID(2)}`)
    expect(row(3).classes()).not.toContain('sel')
    page.unmount()
  })

  it('asks for a reason before it leaves a lap out', async () => {
    const sent: unknown[] = []
    registerEndpoint(`/api/laps/${ID(1)}`, {
      method: 'PATCH',
      handler: async (event) => {
        sent.push(await readBody(event))
        return LAPS[1]
      },
    })
    const { page, row } = await mount()
    await row(1).get('button').trigger('click')
    await page.get('.ask form').trigger('submit')
    await flushPromises()
    expect(page.get('.ask').text()).toContain('please say why')
    expect(sent).toEqual([])
    await page.get('.ask input').setValue(' traffic ')
    await page.get('.ask form').trigger('submit')
    await vi.waitFor(() => expect(page.emitted('changed')).toHaveLength(1))
    expect(sent).toEqual([{ excluded: true, reason: 'traffic' }])
    expect(page.find('.ask').exists()).toBe(false)
    page.unmount()
  })

  it('offers nothing that a coach may not do', async () => {
    signIn('coach')
    const { page } = await mount()
    expect(page.findAll('tbody button')).toHaveLength(0)
    page.unmount()
  })
})
