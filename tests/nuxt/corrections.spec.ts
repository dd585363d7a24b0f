import { mountSuspended, registerEndpoint } from '@nuxt/test-utils/runtime'
import { readBody } from 'h3'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import CircuitLayoutForm from '../../components/circuit/CircuitLayoutForm.vue'
import DayCorrection from '../../components/day/DayCorrection.vue'
import type { Day } from '../../shared/schemas/days'

const ID = (n: number) => `01890000-0000-7000-8000-00000000000${n}`
const FELL = { id: ID(1), name: 'Harrow Fell', timeZone: 'Europe/London', layouts: [] }
const MOOR = { id: ID(2), name: 'Tarn Moor' }

function day(outings: Day['outings']): Day {
  return { id: ID(5), teamId: ID(8), date: '2026-09-12', name: '', notes: 'Noise limit 98 dB', circuit: FELL, outings, version: 3, changedAt: '2026-09-12T08:00:00.000Z' }
}

describe('DayCorrection', () => {
  const sent: unknown[] = []
  beforeEach(() => {
    sent.length = 0
    registerEndpoint('/api/circuits', () => ({ items: [FELL, MOOR] }))
    registerEndpoint(`/api/days/${ID(5)}`, {
      method: 'PUT',
      handler: async (event) => {
        sent.push(await readBody(event))
        return { ...day([]), name: 'kept' }
      },
    })
  })

  async function opened(outings: Day['outings']) {
    const page = await mountSuspended(DayCorrection, { props: { day: day(outings) }, attachTo: document.body })
    await page.get('button').trigger('click')
    await vi.waitFor(() => expect(page.find('form').exists()).toBe(true))
    return page
  }

  it('writes the day anew with what was put right, and closes', async () => {
    const page = await opened([])
    await page.get('[name=circuitId]').setValue(MOOR.id)
    await page.get('[name=date]').setValue('2026-09-13')
    await page.get('[name=name]').setValue(' Autumn open day ')
    await page.get('form').trigger('submit')
    await vi.waitFor(() => expect(page.find('form').exists()).toBe(false))
    expect(sent).toEqual([{ circuitId: MOOR.id, date: '2026-09-13', name: 'Autumn open day', notes: 'Noise limit 98 dB', basedOnVersion: 3 }])
    expect(page.emitted('update:day')).toEqual([[expect.objectContaining({ name: 'kept' })]])
    page.unmount()
  })

  it('leaves the circuit alone once an outing was driven on it', async () => {
    const page = await opened([{} as Day['outings'][number]])
    expect(page.get('[name=circuitId]').attributes()).toHaveProperty('disabled')
    expect(page.text()).toContain('the outings were driven on its layouts')
    await page.get('[name=date]').setValue('2026-09-13')
    await page.get('form').trigger('submit')
    await vi.waitFor(() => expect(sent).toHaveLength(1))
    expect(sent[0]).toMatchObject({ circuitId: FELL.id, date: '2026-09-13' })
    page.unmount()
  })
})

describe('CircuitLayoutForm', () => {
  it('corrects name and direction, and refuses an empty name', async () => {
    const save = vi.fn(async () => {})
    const page = await mountSuspended(CircuitLayoutForm, {
      props: { initial: { name: 'Full', direction: 'clockwise' as const }, action: 'Save', save }, attachTo: document.body,
    })
    await page.get('[name=name]').setValue('')
    await page.get('form').trigger('submit')
    expect(save).not.toHaveBeenCalled()
    expect(page.find('[name=name][aria-invalid]').exists()).toBe(true)
    await page.get('[name=name]').setValue('Full, with chicane')
    await page.get('[name=direction]').setValue('anticlockwise')
    await page.get('form').trigger('submit')
    await vi.waitFor(() => expect(save).toHaveBeenCalledExactlyOnceWith({ name: 'Full, with chicane', direction: 'anticlockwise' }, 0))
    page.unmount()
  })
})
