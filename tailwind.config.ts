import type { Config } from 'tailwindcss'

// Names the values of assets/css/tokens.css. The scales are replaced, not extended: nothing outside the identity can be
// typed by accident. No opacity modifiers (bg-paper/50): the colours are variables.
export default {
  darkMode: ['selector', '[data-sheet="dark"]'],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      paper: { DEFAULT: 'var(--paper)', 2: 'var(--paper-2)' },
      ink: { DEFAULT: 'var(--ink)', 2: 'var(--ink-2)' },
      rule: { DEFAULT: 'var(--rule)', 2: 'var(--rule-2)' },
      grid: { DEFAULT: 'var(--grid)', 2: 'var(--grid-2)' },
      lap: 'var(--lap)',
      ref: 'var(--ref)',
      lost: 'var(--lost)',
      gain: 'var(--gain)',
      coach: { DEFAULT: 'var(--coach)', on: 'var(--on-coach)' },
      mark: 'color-mix(in srgb, var(--mark) calc(var(--mark-alpha) * 100%), transparent)',
      caution: 'var(--caution)',
      wet: 'var(--wet)',
    },
    fontFamily: { slab: 'var(--slab)', mono: 'var(--mono)' },
    fontSize: {
      fig: ['var(--fs-fig)', '1.3'],
      label: ['var(--fs-label)', '1.35'],
      note: ['var(--fs-note)', 'var(--lh-note)'],
      body: ['var(--fs-body)', 'var(--lh-body)'],
      head: ['var(--fs-head)', '1.25'],
      verdict: ['var(--fs-verdict)', '1.25'],
      lead: ['var(--fs-lead)', { lineHeight: 'var(--lh-lead)', letterSpacing: '-0.012em', fontWeight: '500' }],
    },
    borderRadius: { none: '0' },
    boxShadow: { none: 'none' },
    borderWidth: { 0: '0', DEFAULT: 'var(--w-hair)', rule: 'var(--w-rule)', heavy: 'var(--w-heavy)', double: '3px' },
    screens: { tab: '640px', desk: '1200px', phone: { max: '639px' }, paper: { raw: 'print' } },
    extend: {
      spacing: {
        s1: 'var(--s1)',
        s2: 'var(--s2)',
        s3: 'var(--s3)',
        s4: 'var(--s4)',
        s5: 'var(--s5)',
        s6: 'var(--s6)',
        s7: 'var(--s7)',
        s8: 'var(--s8)',
        touch: 'var(--touch)',
        margin: 'var(--margin-col)',
      },
      maxWidth: { measure: 'var(--measure)' },
      minHeight: { touch: 'var(--touch)' },
      gridTemplateColumns: { sheet: 'minmax(0, 1fr) var(--margin-col)' },
      strokeWidth: { hair: '1', rule: '1.5', trace: '2.25', heavy: '4' },
    },
  },
} satisfies Partial<Config>
