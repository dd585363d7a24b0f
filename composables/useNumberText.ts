import type { MaybeRefOrGetter, Ref } from 'vue'
import type { NumberMarks } from '#shared/number-language'
import { ownDecimals, readNumber, writeNumber, writeSigned } from '#shared/number-text'
import { parseShown, toShown, toStored, type ShownUnit } from '#shared/quantities'

interface NumberTextOptions {
  /** In which the figure is read and typed. */
  unit: Pick<ShownUnit, 'factor' | 'offset' | 'digits' | 'least' | 'step'>
  marks: NumberMarks
  /** Whether a figure above zero is written with its sign. */
  plus?: boolean
}

/**
 * The text in a box for a figure. Takes a decimal comma or point and any minus sign; an empty box is null; what cannot
 * be read stays in the box and makes the model NaN, which every schema refuses with its own words. The model is in the
 * stored unit and changes only when something is typed: a figure that somebody typed in another unit keeps its value.
 */
export function useNumberText(model: Ref<number | null>, options: MaybeRefOrGetter<NumberTextOptions>) {
  const text = ref(write(model.value, toValue(options)))
  watch(model, (value) => {
    if (!Object.is(value, parseShown(text.value, toValue(options).unit))) text.value = write(value, toValue(options))
  })

  function typed(event: Event) {
    text.value = (event.target as HTMLInputElement).value
    model.value = parseShown(text.value, toValue(options).unit)
  }

  function tidy() {
    const shown = readNumber(text.value)
    if (!Number.isNaN(shown)) text.value = writeShown(shown, toValue(options))
  }

  function nudge(sign: 1 | -1) {
    const { unit } = toValue(options)
    const shown = readNumber(text.value)
    if (Number.isNaN(shown)) return
    // Six decimals, so that ten steps of a tenth are one.
    const next = Number(((shown ?? 0) + sign * unit.step).toFixed(6))
    text.value = writeShown(next, toValue(options))
    model.value = toStored(next, unit)
  }

  return { text, typed, tidy, nudge }
}

function write(stored: number | null, options: NumberTextOptions): string {
  return stored === null || Number.isNaN(stored) ? '' : writeShown(toShown(stored, options.unit), options)
}

function writeShown(shown: number | null, { unit: { digits, least = 0 }, marks, plus }: NumberTextOptions): string {
  if (shown === null) return ''
  const decimals = Math.max(least, ownDecimals(shown) ?? digits)
  return plus ? writeSigned(shown, decimals, marks, false) : writeNumber(shown, decimals, marks, false)
}
