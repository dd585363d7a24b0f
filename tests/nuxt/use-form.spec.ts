import { mountSuspended } from '@nuxt/test-utils/runtime'
import { flushPromises } from '@vue/test-utils'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defineComponent, h } from 'vue'
import { z } from 'zod'
import { ProblemError } from '../../composables/useApi'
import { useForm } from '../../composables/useForm'

const schema = z.object({
  name: z.string().trim().min(1, 'please give a name'),
  sheet: z.object({ springNpmm: z.number('a figure').nullable() }),
})
type Body = z.output<typeof schema>

const open: { unmount: () => void }[] = []

/** A page with two fields, as the kit would draw them. */
async function page(submit: (body: Body) => Promise<void>, more: { draftKey?: string } = {}) {
  let form!: ReturnType<typeof useForm<typeof schema, Body>>
  const component = defineComponent(() => {
    form = useForm({ schema, initial: { name: '', sheet: { springNpmm: null } } as Body, submit, ...more })
    return () => h('form', { onSubmit: form.onSubmit }, [
      h('input', { name: 'name', value: form.values.name }),
      h('input', { name: 'sheet.springNpmm' }),
    ])
  })
  const wrapper = await mountSuspended(component, { attachTo: document.body })
  open.push(wrapper)
  const send = async () => {
    await wrapper.get('form').trigger('submit')
    await flushPromises()
  }
  return { form, wrapper, send }
}

const conflict = {
  type: 'about:blank', status: 409, title: 'Name taken', detail: 'There is one of this name.',
  errors: [{ path: 'name', message: 'There is one of this name.' }],
}

describe('useForm', () => {
  beforeEach(() => sessionStorage.clear())
  afterEach(() => {
    for (const wrapper of open.splice(0)) wrapper.unmount()
    vi.restoreAllMocks()
  })

  it('does not send what the schema refuses, says where it is wrong and goes there', async () => {
    const submit = vi.fn(async () => {})
    const { form, send } = await page(submit)
    form.values.name = 'Stiffer rear'
    form.values.sheet.springNpmm = Number.NaN
    await send()
    expect(submit).not.toHaveBeenCalled()
    expect({ ...form.errors }).toEqual({ 'sheet.springNpmm': 'a figure' })
    expect(form.problem.value?.status).toBe(422)
    expect(document.activeElement?.getAttribute('name')).toBe('sheet.springNpmm')
  })

  it('sends what the schema made of the values', async () => {
    const submit = vi.fn(async () => {})
    const { form, send } = await page(submit)
    form.values.name = '  Stiffer rear '
    await send()
    expect(submit).toHaveBeenCalledExactlyOnceWith({ name: 'Stiffer rear', sheet: { springNpmm: null } }, 0)
    expect(form.dirty.value).toBe(false)
  })

  it('keeps everything typed when the server refuses, and puts its errors beside the fields', async () => {
    const { form, send } = await page(async () => {
      throw new ProblemError(conflict)
    })
    form.values.name = 'Full'
    form.values.sheet.springNpmm = 34
    await send()
    expect(form.values).toEqual({ name: 'Full', sheet: { springNpmm: 34 } })
    expect(form.errors.name).toBe('There is one of this name.')
    expect(form.problem.value).toEqual(conflict)
    expect([form.dirty.value, form.busy.value]).toEqual([true, false])
    expect(document.activeElement?.getAttribute('name')).toBe('name')
  })

  it('clears old errors on the next try', async () => {
    let first = true
    const { form, send } = await page(async () => {
      if (first) throw new ProblemError(conflict)
    })
    form.values.name = 'Full'
    await send()
    first = false
    await send()
    expect([form.problem.value, { ...form.errors }]).toEqual([null, {}])
  })

  it('turns a fault of its own into a problem instead of falling silent', async () => {
    vi.spyOn(console, 'error').mockImplementation(() => {})
    const { form, send } = await page(async () => {
      throw new TypeError('a fault')
    })
    form.values.name = 'Full'
    await send()
    expect(form.problem.value?.title).toBe('The server could not answer.')
  })

  it('sends once however often it is pressed', async () => {
    let release = () => {}
    const submit = vi.fn(() => new Promise<void>((resolve) => {
      release = resolve
    }))
    const { form, send } = await page(submit)
    form.values.name = 'Full'
    await send()
    await send()
    expect([submit.mock.calls.length, form.busy.value]).toEqual([1, true])
    release()
    await flushPromises()
    expect(form.busy.value).toBe(false)
  })

  it('brings a draft back, can start over, and throws it away once it is sent', async () => {
    const first = await page(async () => {}, { draftKey: 'setup.1' })
    expect(first.form.restored.value).toBe(false)
    first.form.values.sheet.springNpmm = 32
    await flushPromises()
    open.pop()!.unmount()

    const second = await page(async () => {}, { draftKey: 'setup.1' })
    expect([second.form.restored.value, second.form.values.sheet.springNpmm]).toEqual([true, 32])
    second.form.startOver()
    await flushPromises()
    const { restored, values } = second.form
    expect([restored.value, values.sheet.springNpmm, sessionStorage.length]).toEqual([false, null, 0])

    second.form.values.name = 'Stiffer rear'
    await flushPromises()
    expect(sessionStorage.length).toBe(1)
    await second.send()
    expect(sessionStorage.length).toBe(0)
  })

  it.each(['not json', '[]', '3', '{"sheet":5,"name":7,"gone":1}'])('is not upset by the draft %s', async (stored) => {
    sessionStorage.setItem('lapwright.draft.setup.2', stored)
    const { form } = await page(async () => {}, { draftKey: 'setup.2' })
    expect(form.values).toEqual({ name: '', sheet: { springNpmm: null } })
    expect(form.restored.value).toBe(false)
  })

  it('asks before the tab is closed with something typed, and not otherwise', async () => {
    const { form } = await page(async () => {})
    const ask = () => {
      const event = new Event('beforeunload', { cancelable: true })
      window.dispatchEvent(event)
      return event.defaultPrevented
    }
    expect(ask()).toBe(false)
    form.values.name = 'Full'
    expect(ask()).toBe(true)
    form.rebase()
    expect(ask()).toBe(false)
  })
})
