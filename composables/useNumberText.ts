import type { MaybeRefOrGetter, Ref } from 'vue'

interface NumberTextOptions {
  /** Stored figure divided by shown figure: 100 shows a pressure kept in kPa in bar. */
  scale: number
  /** Decimals that are always shown. */
  digits: number
  /** What the arrow keys add or take away, in the unit shown. */
  step: number
  /** Whether a figure above zero is written with its sign. */
  plus?: boolean
}

/** Figures are kept to a millionth, so that 2.1 bar is 210 kPa and not 210.00000000000003. */
const tidyFloat = (value: number) => Math.round(value * 1e6) / 1e6

/**
 * The text in a box for a figure. Takes a decimal comma or point and any minus sign; an empty box is null; what cannot
 * be read stays in the box and makes the model NaN, which every schema refuses with its own words.
 */
export function useNumberText(model: Ref<number | null>, options: MaybeRefOrGetter<NumberTextOptions>) {
  const text = ref(write(model.value, toValue(options)))
  watch(model, (value) => {
    if (!Object.is(value, read(text.value, toValue(options)))) text.value = write(value, toValue(options))
  })

  function typed(event: Event) {
    text.value = (event.target as HTMLInputElement).value
    model.value = read(text.value, toValue(options))
  }

  function tidy() {
    const value = read(text.value, toValue(options))
    if (!Number.isNaN(value)) text.value = write(value, toValue(options))
  }

  function nudge(sign: 1 | -1) {
    const { scale, step } = toValue(options)
    const value = read(text.value, toValue(options))
    if (Number.isNaN(value)) return
    const next = tidyFloat((value ?? 0) + sign * step * scale)
    text.value = write(next, toValue(options))
    model.value = next
  }

  return { text, typed, tidy, nudge }
}

function write(stored: number | null, { scale, digits, plus }: NumberTextOptions): string {
  if (stored === null || Number.isNaN(stored)) return ''
  const shown = tidyFloat(stored / scale)
  const own = String(Math.abs(shown)).split('.')[1]?.length ?? 0
  return plus ? formatDifference(shown, Math.max(digits, own)) : formatNumber(shown, Math.max(digits, own))
}

function read(typed: string, { scale }: NumberTextOptions): number | null {
  const plain = typed.trim().replace(/[\u2212\u2013]/g, '-').replace(',', '.')
  if (plain === '') return null
  if (!/^[+-]?(?:\d+\.?\d*|\.\d+)$/.test(plain)) return Number.NaN
  return tidyFloat(Number(plain) * scale)
}
