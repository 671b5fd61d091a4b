import type { Config } from 'tailwindcss'

const token = (name: string) => `var(--${name})`
const tokens = (...names: string[]) => Object.fromEntries(names.map(name => [name, token(name)]))

export default {
  content: ['./{components,layouts,pages}/**/*.{vue,ts}', './app.vue', './error.vue'],
  theme: {
    // Only our own colours, sizes and square corners: nothing else can slip in.
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      ...tokens('sized', 'lit', 'blotter', 'graphite', 'slate', 'pencil', 'rule', 'edge', 'prussian', 'prussian-deep', 'prussian-wash',
        'on-action', 'on-action-soft', 'ferric', 'ferric-line', 'ferric-ink', 'ferric-wash', 'oxide', 'oxide-wash', 'clear-film', 'film-edge', 'full-ink', 'unexposed'),
      step: Object.fromEntries(Array.from({ length: 10 }, (_, i) => [i + 1, token(`step-${i + 1}`)])),
    },
    fontSize: {
      13: ['13px', '18px'], 15: ['15px', '22px'], 16: ['16px', '24px'], 17: ['17px', '26px'], 19: ['19px', '28px'],
      25: ['25px', { lineHeight: '32px', letterSpacing: '-.005em' }],
      34: ['34px', { lineHeight: '40px', letterSpacing: '-.012em' }],
      48: ['48px', { lineHeight: '54px', letterSpacing: '-.018em' }],
      136: ['136px', { lineHeight: '120px', letterSpacing: '-.035em' }],
    },
    fontWeight: { light: '300', normal: '400', medium: '500', semibold: '600' },
    borderRadius: {},
    boxShadow: {},
    screens: { tablet: '720px', desk: '1080px' },
    extend: {
      spacing: { target: '44px', hand: '56px', side: 'var(--page-side)' },
      transitionDuration: { DEFAULT: '120ms' },
    },
  },
} satisfies Config
