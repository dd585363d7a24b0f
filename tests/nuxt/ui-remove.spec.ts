import { mountSuspended, registerEndpoint } from '@nuxt/test-utils/runtime'
import { createError, getQuery } from 'h3'
import { afterEach, describe, expect, it, vi } from 'vitest'
import UiRemove from '../../components/ui/UiRemove.vue'

const URL = '/api/outings/01890000-0000-7000-8000-000000000001'
const open: { unmount: () => void }[] = []

afterEach(() => {
  for (const wrapper of open.splice(0)) wrapper.unmount()
})

async function shown(answer: (event: Parameters<typeof getQuery>[0]) => unknown) {
  registerEndpoint(URL, { method: 'DELETE', handler: answer as never })
  const wrapper = await mountSuspended(UiRemove, {
    props: { what: 'outing', url: URL, query: { withLog: ['a', 'b'] }, gone: 'Outing 1 is removed.' },
    slots: { default: () => 'It goes with two logs.' }, attachTo: document.body,
  })
  open.push(wrapper)
  return wrapper
}

const focused = () => document.activeElement?.textContent?.trim()

describe('UiRemove', () => {
  it('asks first, with what goes, and keeps it on Escape', async () => {
    const asked = vi.fn(() => null)
    const wrapper = await shown(asked)
    await wrapper.get('button').trigger('click')
    await vi.waitFor(() => expect(focused()).toBe('Remove the outing'))
    expect(wrapper.text()).toContain('It goes with two logs. This cannot be taken back.')
    await wrapper.get('button').trigger('keydown', { key: 'Escape' })
    await vi.waitFor(() => expect(focused()).toBe('Remove this outing'))
    expect(asked).not.toHaveBeenCalled()
  })

  it('removes once, with what was named, and says so', async () => {
    const queries: unknown[] = []
    const wrapper = await shown((event) => {
      queries.push(getQuery(event))
      return null
    })
    await wrapper.get('button').trigger('click')
    const sure = wrapper.findAll('button')[0]!
    void sure.trigger('click')
    void sure.trigger('click')
    await vi.waitFor(() => expect(wrapper.emitted('removed')).toHaveLength(1))
    expect(queries).toEqual([{ withLog: ['a', 'b'] }])
    await vi.waitFor(() => expect(useNotice().value).toBe('Outing 1 is removed.'))
  })

  it('says why it stays, with the page that helps, and gives the focus back', async () => {
    const problem = { type: 'about:blank', title: 'Still in use', status: 409, detail: 'The log a.csv belongs to it.', see: '/logs/7' }
    const wrapper = await shown(() => {
      throw createError({ statusCode: 409, data: problem })
    })
    await wrapper.get('button').trigger('click')
    await wrapper.findAll('button')[0]!.trigger('click')
    await vi.waitFor(() => expect(wrapper.find('[role=alert]').exists()).toBe(true))
    await vi.waitFor(() => expect(focused()).toBe('Remove this outing'))
    expect(wrapper.emitted('removed')).toBeUndefined()
  })
})
