import { mountSuspended } from '@nuxt/test-utils/runtime'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { h } from 'vue'
import CarForm from '../../components/car/CarForm.vue'
import UiCorrection from '../../components/ui/UiCorrection.vue'
import UiForm from '../../components/ui/UiForm.vue'
import UiList from '../../components/ui/UiList.vue'

afterEach(() => {
  sessionStorage.clear()
  document.body.innerHTML = ''
})

const PROBLEM = { type: 'about:blank', title: 'The name is taken', status: 409, detail: 'There is another one.' }

describe('UiForm', () => {
  const mount = (props: object) => mountSuspended(UiForm, {
    props: { problem: null, busy: false, action: 'Save', ...props },
    slots: { default: () => h('input', { name: 'field' }), actions: () => h('a', 'Leave it') },
  })

  it('puts the problem before the fields, and the way out beside the button that sends', async () => {
    const form = await mount({ problem: PROBLEM })
    const html = form.html()
    expect(html.indexOf('The name is taken')).toBeLessThan(html.indexOf('name="field"'))
    expect(form.get('.row').text()).toMatch(/^Save\s*Leave it$/)
  })

  it('hands the sending on, and sends nothing by itself', async () => {
    const form = await mount({})
    const event = new Event('submit', { cancelable: true, bubbles: true })
    form.get('form').element.dispatchEvent(event)
    expect(event.defaultPrevented).toBe(true)
    expect(form.emitted('submit')).toHaveLength(1)
  })

  it('says that it works, and takes no second touch meanwhile', async () => {
    const form = await mount({ busy: true, working: 'Opening the book …' })
    const button = form.get('button.first')
    expect(button.text()).toBe('Opening the book …')
    expect(button.attributes('disabled')).toBeDefined()
  })

  it('tells of a draft that was brought back, and lets it go', async () => {
    const form = await mount({ restored: true })
    expect(form.get('[role=status]').text()).toContain('brought back')
    await form.get('[role=status] button').trigger('click')
    expect(form.emitted('startOver')).toHaveLength(1)
    expect((await mount({})).find('[role=status]').exists()).toBe(false)
  })
})

describe('CarForm', () => {
  const INITIAL = { name: '', number: '', year: null, kind: '', notes: '' }
  const mount = (save = vi.fn(async () => undefined)) =>
    mountSuspended(CarForm, { props: { initial: INITIAL, action: 'Add the car', draftKey: 'car-test', save } })

  it('keeps what was typed over a reload, and nothing once it is saved', async () => {
    const first = await mount()
    await first.get('input[name=name]').setValue('No. 47')
    await first.get('textarea[name=notes]').setValue('Cage and bucket seats')
    first.unmount()
    const save = vi.fn(async () => undefined)
    const second = await mount(save)
    await vi.waitFor(() => expect((second.get('input[name=name]').element as HTMLInputElement).value).toBe('No. 47'))
    expect(second.text()).toContain('brought back')
    await second.get('form').trigger('submit')
    await vi.waitFor(() => expect(save).toHaveBeenCalledOnce())
    second.unmount()
    const third = await mount()
    expect((third.get('input[name=name]').element as HTMLInputElement).value).toBe('')
  })

  it('ties its help to its fields', async () => {
    const form = await mount()
    const year = form.get('input[name=year]')
    const help = year.attributes('aria-describedby')!.split(' ').map(id => form.find(`[id="${id}"]`).text()).join(' ')
    expect(help).toContain('as in its papers')
  })
})

describe('UiList', () => {
  const ITEMS = [{ id: 'a', name: 'No. 47' }, { id: 'b', name: 'No. 11' }]
  const mount = (props: object) => mountSuspended(UiList, {
    props: {
      items: ITEMS, caption: 'Cars', columns: [{ label: 'car' }, { label: 'kind', optional: true }], emptyTitle: 'Which car?',
      add: { label: 'Add a car', to: '/cars/new' }, ...props,
    },
    slots: { row: ({ item }: { item: object }) => h('th', { scope: 'row' }, (item as typeof ITEMS[number]).name), empty: () => h('p', 'Cars come first.') },
  })

  it('is a table with a caption, a head for each column and one way to add', async () => {
    const list = await mount({})
    expect(list.get('caption').text()).toBe('Cars')
    expect(list.findAll('thead th').map(head => head.text())).toEqual(['car', 'kind'])
    expect(list.findAll('tbody tr').map(row => row.text())).toEqual(['No. 47', 'No. 11'])
    expect(list.findAll('a').map(link => link.attributes('href'))).toEqual(['/cars/new'])
  })

  it('teaches the next step where it is empty, and offers it once', async () => {
    const list = await mount({ items: [] })
    expect(list.find('table').exists()).toBe(false)
    expect(list.get('h2').text()).toBe('Which car?')
    expect(list.text()).toContain('Cars come first.')
    expect(list.findAll('a')).toHaveLength(1)
  })

  it('offers nothing to those who may not add', async () => {
    expect((await mount({ add: undefined })).findAll('a')).toHaveLength(0)
    expect((await mount({ add: undefined, items: [] })).findAll('a')).toHaveLength(0)
  })
})

describe('UiCorrection', () => {
  it('unfolds its form, and gives the focus back to its button', async () => {
    const page = await mountSuspended(UiCorrection, {
      attachTo: document.body,
      slots: { default: ({ close }: { close: () => void }) => h('button', { id: 'leave', onClick: close }, 'Leave it') },
    })
    await page.get('button').trigger('click')
    await page.get('#leave').trigger('click')
    await vi.waitFor(() => expect(document.activeElement?.textContent).toContain('Correct this sheet'))
  })
})
