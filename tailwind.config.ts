import type { Config } from 'tailwindcss'

const token = (name: string): string => `var(--${name})`
const px = (...sizes: number[]): Record<string, string> => Object.fromEntries(sizes.map(size => [String(size), `${size}px`]))

/** The theme speaks in meanings: `bg-surface`, `text-text-2`, `h-bench`. Raw palette values stay in tokens.css. */
export default {
  content: ['./components/**/*.{vue,ts}', './layouts/**/*.vue', './pages/**/*.vue', './utils/**/*.ts', './app.vue', './error.vue'],
  theme: {
    colors: {
      'transparent': 'transparent',
      'current': 'currentColor',
      'inherit': 'inherit',
      'ground': token('ground'),
      'surface': token('surface'),
      'surface-2': token('surface-2'),
      'surface-3': token('surface-3'),
      'text': token('text'),
      'text-2': token('text-2'),
      'line': token('line'),
      'line-strong': token('line-strong'),
      'tick': token('tick'),
      'field-line': token('field-line'),
      'accent': token('accent'),
      'on-accent': token('on-accent'),
      'accent-soft': token('accent-soft'),
      'accent-band': token('accent-band'),
      'accent-mid': token('accent-mid'),
      'accent-line': token('accent-line'),
      'soon': token('soon'),
      'soon-soft': token('soon-soft'),
      'soon-text': token('soon-text'),
      'soon-line': token('soon-line'),
      'on-soon': token('on-soon'),
      'alarm': token('alarm'),
      'alarm-deep': token('alarm-deep'),
      'alarm-soft': token('alarm-soft'),
      'alarm-text': token('alarm-text'),
      'on-alarm': token('on-alarm'),
      'inverse': token('inverse'),
      'on-inverse': token('on-inverse'),
    },
    fontFamily: {
      sans: [token('f-text')],
      cond: [token('f-cond')],
      mono: [token('f-mono')],
    },
    fontSize: px(11, 12, 13, 14, 15, 16, 17, 18, 20, 22, 24, 26, 28, 30, 34, 38, 40, 42, 46, 56, 72, 96, 100, 112, 172, 176, 200, 300),
    borderRadius: { 0: '0', 1: '2px', 2: '4px', 3: '6px', cup: '12px', full: '9999px', none: '0' },
    boxShadow: { none: 'none', 1: token('sh-1'), 2: token('sh-2'), 3: token('sh-3') },
    extend: {
      spacing: {
        'row': '30px',
        'office': '36px',
        'touch': '48px',
        'bench': '64px',
        'bench-lg': '80px',
        'booth': '96px',
      },
      borderColor: { DEFAULT: token('line') },
      borderWidth: { 3: '3px', 6: '6px' },
      lineHeight: { tight: '1.05', snug: '1.25', text: '1.45' },
      transitionDuration: { fast: token('m-fast'), base: token('m-base'), slow: token('m-slow') },
      transitionTimingFunction: { state: token('m-ease') },
      maxWidth: { prose: '68ch' },
    },
  },
} satisfies Config
