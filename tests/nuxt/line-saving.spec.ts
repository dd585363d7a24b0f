import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { ref } from 'vue'
import LineInput from '../../components/circuit/LineInput.vue'
import LineSaving from '../../components/circuit/LineSaving.vue'

afterEach(() => {
  document.body.innerHTML = ''
})

const WARNING = 'The car crosses sector line 1 about twice a lap; draw it shorter.'

async function mount(props: { warnings?: string[], asking?: boolean }) {
  const save = vi.fn(async () => undefined)
  const still = { busy: ref(false), problem: ref(null), theirs: ref(null), recutting: ref(null) }
  const saving = { ...still, save, takeTheirs: vi.fn(), keepMine: vi.fn() }
  const page = await mountSuspended(LineSaving, {
    props: { saving: saving as never, dirty: true, hasStart: true, logs: [], logId: 'x', warnings: [], asking: false, ...props },
    attachTo: document.body,
  })
  const button = (text: string) => page.findAll('button').find(each => each.text() === text)
  return { page, save, button }
}

describe('LineSaving', () => {
  it('saves lines that nothing speaks against at once', async () => {
    const { save, button } = await mount({})
    await button('Save the lines')!.trigger('click')
    expect(save).toHaveBeenCalledOnce()
  })

  it('asks first when the page warns, with the focus on the way back', async () => {
    const { page, save, button } = await mount({ warnings: [WARNING] })
    await button('Save the lines')!.trigger('click')
    expect(save).not.toHaveBeenCalled()
    expect(page.get('[role=alert]').text()).toContain(WARNING)
    await vi.waitFor(() => expect(document.activeElement?.textContent?.trim()).toBe('Back to the lines'))
    await button('Back to the lines')!.trigger('click')
    expect(save).not.toHaveBeenCalled()
    expect(page.find('[role=alert]').exists()).toBe(false)

    await button('Save the lines')!.trigger('click')
    await button('Save all the same')!.trigger('click')
    expect(save).toHaveBeenCalledOnce()
  })

  it('waits for a trial that is still being asked for, so that no warning comes too late', async () => {
    const { page, save, button } = await mount({ asking: true })
    await button('Save the lines')!.trigger('click')
    expect(save).not.toHaveBeenCalled()
    await page.setProps({ asking: false, warnings: [WARNING] })
    expect(save).not.toHaveBeenCalled()
    expect(page.get('[role=alert]').text()).toContain(WARNING)
  })

  it('forgets the question when the lines are changed after it', async () => {
    const { page, save } = await mount({ warnings: [WARNING] })
    await page.get('button.save').trigger('click')
    await page.setProps({ asking: true })
    await page.setProps({ asking: false, warnings: [] })
    expect(save).not.toHaveBeenCalled()
  })
})

describe('LineInput', () => {
  it('refuses a place beyond the trace, and says why', async () => {
    const input = await mountSuspended(LineInput, { props: { label: 'at, m', value: 400, from: 0, to: 1200, why: 'the trace ends there' } })
    await input.get('input').setValue('5000')
    expect(input.emitted('take')).toBeUndefined()
    expect(input.get('[role=alert]').text()).toMatch(/between 0 and 1.?200.*the trace ends there/)
    await input.get('input').setValue('1100')
    expect(input.emitted('take')).toEqual([[1100]])
  })
})
