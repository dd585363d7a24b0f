import { mountSuspended, registerEndpoint } from '@nuxt/test-utils/runtime'
import { readBody } from 'h3'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { defineComponent, h, ref } from 'vue'
import PreferencesForm from '../../components/account/PreferencesForm.vue'
import LapTable from '../../components/lap/LapTable.vue'
import SetupSetting from '../../components/setup/SetupSetting.vue'
import UiNumber from '../../components/ui/UiNumber.vue'
import type { Lap } from '../../shared/schemas/days'
import { FIRST_PREFERENCES, type Me, type Preferences } from '../../shared/schemas/people'
import { SETUP_FIELDS } from '../../shared/setup-fields'
import { useSessionStore } from '../../stores/session'

const ID = (n: number) => `01890000-0000-7000-8000-00000000000${n}`
const IMPERIAL: Preferences = { units: 'imperial', numberLanguage: 'de-DE', sheet: 'dark' }

function signIn(preferences: Preferences) {
  const me: Me = { id: ID(9), name: 'Nell Placeholder', email: 'nell@lapwright.example', preferences, teams: [] }
  useSessionStore().me = me
  return me
}

afterEach(() => (useSessionStore().me = null))

describe('PreferencesForm', () => {
  const sent: unknown[] = []
  beforeEach(() => {
    sent.length = 0
    const me = signIn(FIRST_PREFERENCES)
    registerEndpoint('/api/me/preferences', {
      method: 'PUT',
      handler: async (event) => {
        const preferences = await readBody(event) as Preferences
        sent.push(preferences)
        return { ...me, preferences }
      },
    })
  })

  it('shows by example what a choice does, before it is kept', async () => {
    const page = await mountSuspended(PreferencesForm)
    const example = () => page.get('.example').text()
    expect(example()).toContain('144 km/h')
    expect(example()).toContain('1:31.482')
    await page.get('[name=units]').setValue('imperial')
    await page.get('[name=numberLanguage]').setValue('de-DE')
    await page.get('[name=sheet]').setValue('dark')
    // 32 N/mm and 180 kPa by NIST SP 811, B.8.
    for (const figure of ['89 mph', '1:31,482', '+0,613 s', '26,1 psi', '182,7 lbf/in', '93,2 °F', '4068 ft', 'Sat 12.09.2026']) expect(example()).toContain(figure)
    expect(page.get('.example').attributes('data-sheet')).toBe('dark')
    expect(useSessionStore().preferences).toEqual(FIRST_PREFERENCES)
    page.unmount()
  })

  it('keeps the choice, and the rest of the book follows it', async () => {
    const page = await mountSuspended(PreferencesForm)
    await page.get('[name=units]').setValue('imperial')
    await page.get('[name=numberLanguage]').setValue('de-DE')
    await page.get('[name=sheet]').setValue('dark')
    await page.get('form').trigger('submit')
    await vi.waitFor(() => expect(page.find('[role=status]').exists()).toBe(true))
    expect(sent).toEqual([IMPERIAL])
    expect(useSessionStore().preferences).toEqual(IMPERIAL)
    await vi.waitFor(() => expect(document.documentElement.dataset.sheet).toBe('dark'))
    page.unmount()
  })
})

describe('in imperial units and German figures', () => {
  beforeEach(() => {
    signIn(IMPERIAL)
  })

  it('lap times have a decimal comma', async () => {
    const lap = (number: number, timeS: number): Lap => ({
      id: ID(number), number, logId: null, kind: 'timed', startS: 0, timeS, sectorsS: [timeS], flags: [], excluded: false, excludedReason: '',
    })
    const page = await mountSuspended(LapTable, { props: { laps: [lap(1, 91.482), lap(2, 90.869)] } })
    expect(page.findAll('tbody .time').map(cell => cell.text())).toEqual(['1:31,482', 'best 1:30,869'])
    expect(page.get('tbody .behind').text()).toContain('+0,613')
    page.unmount()
  })

  async function setting(path: string, start: number | null, was?: number) {
    const model = ref<number | string | null>(start)
    const field = SETUP_FIELDS.find(one => one.path === path)!
    const page = defineComponent(() => () => h(SetupSetting, {
      field, was, 'revision': 2, 'editable': true, 'modelValue': model.value,
      'onUpdate:modelValue': (value: number | string | null) => {
        model.value = value
      },
    }))
    const wrapper = await mountSuspended(page)
    return { wrapper, model, box: wrapper.get('input') }
  }

  it('a setting is typed in pounds, kept in newtons, and shown as it was typed', async () => {
    const { wrapper, model, box } = await setting('corners.rl.springNpmm', 32, 32)
    expect((box.element as HTMLInputElement).value).toBe('182,7')
    expect(wrapper.get('.u').text()).toBe('lbf/in')
    // Looking at a figure changes nothing.
    await box.trigger('blur')
    expect([model.value, wrapper.find('del').exists()]).toEqual([32, false])
    await box.setValue('160.5')
    await box.trigger('blur')
    expect((box.element as HTMLInputElement).value).toBe('160,5')
    // 0.175 126 835 N/mm a pound-force an inch.
    expect(model.value).toBeCloseTo(160.5 * 0.175126835, 6)
    const again = await setting('corners.rl.springNpmm', JSON.parse(JSON.stringify(model.value)) as number)
    expect((again.box.element as HTMLInputElement).value).toBe('160,5')
    wrapper.unmount()
    again.wrapper.unmount()
  })

  it('what is counted is left as it is', async () => {
    const { wrapper, box } = await setting('corners.fl.bumpClicks', 7)
    expect([(box.element as HTMLInputElement).value, wrapper.get('.u').text()]).toEqual(['7', 'clicks'])
    wrapper.unmount()
  })

  it('a temperature is typed in degrees Fahrenheit', async () => {
    const model = ref<number | null>(null)
    const page = await mountSuspended(defineComponent(() => () => h(UiNumber, {
      'label': 'Track', 'name': 'track', 'quantity': 'temperature', 'modelValue': model.value,
      'onUpdate:modelValue': (value: number | null) => {
        model.value = value
      },
    })))
    await page.get('input').setValue('212')
    expect(model.value).toBeCloseTo(100, 10)
    expect(page.get('.unit').text()).toBe('°F')
    page.unmount()
  })
})
