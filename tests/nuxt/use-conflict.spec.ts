import { mountSuspended } from '@nuxt/test-utils/runtime'
import { flushPromises } from '@vue/test-utils'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defineComponent, h } from 'vue'
import { z } from 'zod'
import UiForm from '../../components/ui/UiForm.vue'
import { CHANGED_TYPE } from '../../shared/schemas/common'
import { ProblemError } from '../../composables/useApi'
import { useForm } from '../../composables/useForm'

const schema = z.object({ name: z.string(), corner: z.object({ springNpmm: z.number().nullable() }) })
type Body = z.output<typeof schema>

const changed = { type: CHANGED_TYPE, status: 409, title: 'Changed by somebody else', detail: 'Somebody else changed this sheet.' }
const body = (name: string, springNpmm: number | null = null): Body => ({ name, corner: { springNpmm } })

const open: { unmount: () => void }[] = []

/** A server that holds one sheet, and a form that was filled from an older version of it. */
async function page(draftKey?: string) {
  const server = { version: 7, changedAt: '2026-09-12T13:32:00.000Z', values: body('Theirs', 28) }
  const submit = vi.fn(async (sent: Body, basedOnVersion: number) => {
    if (basedOnVersion !== server.version) throw new ProblemError(changed)
    Object.assign(server, { version: server.version + 1, values: sent })
  })
  let form!: ReturnType<typeof useForm<typeof schema, Body>>
  const component = defineComponent(() => {
    form = useForm({
      schema, initial: body('Before'), submit, draftKey,
      stored: { version: 6, read: async () => structuredClone(server) },
    })
    return () => h(UiForm, {
      problem: form.problem.value, conflict: form.conflict, busy: form.busy.value, action: 'Save', onSubmit: form.onSubmit,
    })
  })
  const wrapper = await mountSuspended(component, { attachTo: document.body })
  open.push(wrapper)
  const press = async (text: string) => {
    const button = wrapper.findAll('button').find(one => one.text() === text)
    if (!button) throw new Error(`no button ${text} in: ${wrapper.text()}`)
    ;(button.element as HTMLButtonElement).click()
    await flushPromises()
  }
  return { server, submit, form, wrapper, press }
}

describe('a form whose sheet somebody else has changed', () => {
  beforeEach(() => sessionStorage.clear())
  afterEach(() => {
    for (const wrapper of open.splice(0)) wrapper.unmount()
  })

  it('says so, keeps what was typed, and writes nothing', async () => {
    const { server, form, wrapper, press } = await page()
    form.values.name = 'Mine'
    await press('Save')
    expect(wrapper.get('[role=alert]').text()).toMatch(/Somebody else changed this sheet at \d\d:\d\d\./)
    expect(document.activeElement?.getAttribute('role')).toBe('alert')
    expect(form.values).toEqual(body('Mine'))
    expect([server.version, form.dirty.value]).toEqual([7, true])
  })

  it('saves over theirs when that is chosen, and not by pressing the same button again', async () => {
    const { server, submit, form, wrapper, press } = await page()
    form.values.name = 'Mine'
    await press('Save')
    await press('Save')
    expect(server.values.name).toBe('Theirs')
    await press('Save mine over it')
    expect(server.values).toEqual(body('Mine'))
    expect(submit.mock.calls.map(call => call[1])).toEqual([6, 6, 7])
    expect([wrapper.find('[role=alert]').exists(), form.dirty.value]).toEqual([false, false])
  })

  it('tells of a third person who came between', async () => {
    const { server, form, press } = await page()
    form.values.name = 'Mine'
    await press('Save')
    Object.assign(server, { version: 8, values: body('A third one') })
    await press('Save mine over it')
    expect(server.values.name).toBe('A third one')
    await press('See theirs')
    expect(form.values.name).toBe('A third one')
    await press('Back to mine')
    await press('Save mine over it')
    expect(server.values.name).toBe('Mine')
  })

  it('shows theirs and comes back as often as wanted', async () => {
    const { form, press } = await page()
    form.values.corner.springNpmm = 34
    await press('Save')
    for (let i = 0; i < 2; i++) {
      await press('See theirs')
      expect(form.values).toEqual(body('Theirs', 28))
      await press('Back to mine')
      expect(form.values).toEqual(body('Before', 34))
    }
    expect(form.conflict.basedOn).toBe(6)
  })

  it('goes on from theirs when that is taken', async () => {
    const { server, form, wrapper, press } = await page()
    form.values.name = 'Mine'
    await press('Save')
    await press('See theirs')
    await press('Take theirs')
    expect([form.dirty.value, wrapper.find('[role=alert]').exists()]).toEqual([false, false])
    form.values.corner.springNpmm = 30
    await press('Save')
    expect(server.values).toEqual(body('Theirs', 30))
  })

  it('keeps in its draft what was typed, while theirs is shown, and the version it was based on', async () => {
    const { form, press } = await page('sheet')
    form.values.name = 'Mine'
    await flushPromises()
    await press('Save')
    await press('See theirs')
    open.pop()!.unmount()

    const again = await page('sheet')
    again.form.conflict.home.version = 7
    expect([again.form.values.name, again.form.conflict.basedOn]).toEqual(['Mine', 6])
    again.form.startOver()
    expect([again.form.values.name, again.form.conflict.basedOn]).toEqual(['Before', 7])
  })

  it('is left as it is, with the words of the server, when theirs cannot be read', async () => {
    const { form, wrapper, server, press } = await page()
    // A function cannot be handed over, so the reading fails.
    Object.assign(server, { values: () => 'gone' })
    form.values.name = 'Mine'
    await press('Save')
    expect(wrapper.get('[role=alert]').text()).toContain('Changed by somebody else')
    expect(form.values.name).toBe('Mine')
  })
})
