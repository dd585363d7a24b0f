import { mountSuspended } from '@nuxt/test-utils/runtime'
import { describe, expect, it } from 'vitest'
import { defineComponent, h, ref } from 'vue'
import UiNumber from '../../components/ui/UiNumber.vue'

/** The field with a model around it, as a page has it. */
async function mounted(start: number | null, props: Record<string, unknown> = {}) {
  const model = ref(start)
  const page = defineComponent(() => () => h(UiNumber, {
    'label': 'Spring', 'name': 'spring', 'modelValue': model.value, ...props,
    'onUpdate:modelValue': (value: number | null) => {
      model.value = value
    },
  }))
  const wrapper = await mountSuspended(page)
  const input = wrapper.get('input')
  const text = () => (input.element as HTMLInputElement).value
  return { wrapper, input, model, text }
}

describe('UiNumber', () => {
  it.each([
    ['34', 34],
    ['5,4', 5.4],
    ['5.4', 5.4],
    [' 7 ', 7],
    ['.5', 0.5],
    ['+0.5', 0.5],
    ['-3.1', -3.1],
    ['\u22123.1', -3.1],
    ['', null],
    ['abc', Number.NaN],
    ['1.2.3', Number.NaN],
    ['1e5', Number.NaN],
    ['-', Number.NaN],
  ])('reads %j as %d', async (typed, value) => {
    const { input, model } = await mounted(1)
    await input.setValue(typed)
    expect(model.value).toBe(value)
  })

  it('leaves what is being typed alone and tidies it afterwards', async () => {
    const { input, text } = await mounted(null, { quantity: 'pressure' })
    await input.setValue('1,8')
    expect(text()).toBe('1,8')
    await input.trigger('blur')
    expect(text()).toBe('1.80')
  })

  it('keeps what it cannot read in the box', async () => {
    const { input, text } = await mounted(12)
    await input.setValue('abc')
    await input.trigger('blur')
    expect(text()).toBe('abc')
  })

  it('shows a pressure kept in kPa in bar, without the dust of the conversion', async () => {
    const { input, model, text } = await mounted(180, { quantity: 'pressure' })
    expect(text()).toBe('1.80')
    await input.setValue('2.1')
    expect(model.value).toBe(210)
  })

  it('writes a figure that comes from outside, and nothing for null', async () => {
    const { wrapper, model, text } = await mounted(-3.1)
    expect(text()).toBe('\u22123.1')
    model.value = null
    await wrapper.vm.$nextTick()
    expect(text()).toBe('')
  })

  it('steps with the arrow keys from where it stands', async () => {
    const { input, model, text } = await mounted(-0.1, { quantity: 'angle' })
    await input.trigger('keydown', { key: 'ArrowUp' })
    expect([model.value, text()]).toEqual([0, '0'])
    await input.trigger('keydown', { key: 'ArrowDown' })
    await input.trigger('keydown', { key: 'ArrowDown' })
    expect([model.value, text()]).toEqual([-0.2, '\u22120.2'])
  })

  it('is tied to its label, unit, help and error', async () => {
    const { wrapper, input } = await mounted(1, { quantity: 'springRate', help: 'per corner', error: 'between 1 and 1000 N/mm' })
    expect(wrapper.get('label').attributes('for')).toBe(input.attributes('id'))
    const ids = input.attributes('aria-describedby')!.split(' ')
    expect(ids.map(id => wrapper.get(`#${id}`).text())).toEqual(['N/mm', 'per corner', 'between 1 and 1000 N/mm'])
    expect(input.attributes('aria-invalid')).toBe('true')
  })

  it('offers phones a keyboard with a minus where one is needed', async () => {
    expect((await mounted(1)).input.attributes('inputmode')).toBe('decimal')
    expect((await mounted(1, { signed: true })).input.attributes('inputmode')).toBe('text')
  })
})
