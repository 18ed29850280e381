// The design tokens (src/tokens.css) under Tailwind's names. Colours stay custom properties, so one class serves light, dark and print.
import type { Config } from 'tailwindcss';
const v = (n: string) => `var(--${n})`;
export default {
  content: ['./src/**/*.{html,svelte,ts}'],
  darkMode: ['selector', '[data-theme="dark"]'],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      ground: { DEFAULT: v('ground'), 2: v('ground-2') },
      paper: v('paper'),
      raised: v('raised'),
      sunken: v('sunken'),
      ink: { DEFAULT: v('ink'), 2: v('ink-2'), 3: v('ink-3'), invert: v('ink-invert') },
      rule: { DEFAULT: v('rule'), 2: v('rule-2') },
      edge: v('edge'),
      sedge: { DEFAULT: v('sedge'), hover: v('sedge-hover'), soft: v('sedge-soft'), on: v('on-sedge') },
      link: v('link'),
      gold: { DEFAULT: v('gold'), soft: v('gold-soft'), on: v('on-gold') },
      'sp-a': { DEFAULT: v('sp-a'), ink: v('sp-a-ink'), soft: v('sp-a-soft') },
      'sp-b': { DEFAULT: v('sp-b'), ink: v('sp-b-ink'), soft: v('sp-b-soft') },
      holds: { DEFAULT: v('holds'), soft: v('holds-soft') },
      depends: { DEFAULT: v('depends'), soft: v('depends-soft') },
      lost: { DEFAULT: v('lost'), soft: v('lost-soft') },
      cycles: { DEFAULT: v('cycles'), soft: v('cycles-soft') },
      unknown: { DEFAULT: v('unknown'), soft: v('unknown-soft') },
      stale: { DEFAULT: v('stale'), soft: v('stale-soft') },
      error: { DEFAULT: v('error'), soft: v('error-soft') },
      plot: v('plot'),
      axis: v('axis'),
      tick: v('tick'),
      grid: v('grid'),
      blade: v('blade'),
      halo: v('halo'),
      threshold: v('threshold'),
      hatch: v('hatch')
    },
    fontFamily: { voice: v('font-voice'), ui: v('font-ui'), code: v('font-code') },
    fontSize: {
      '2xs': v('text-2xs'),
      xs: v('text-xs'),
      sm: v('text-sm'),
      md: v('text-md'),
      lg: v('text-lg'),
      xl: v('text-xl'),
      '2xl': v('text-2xl'),
      '3xl': v('text-3xl')
    },
    spacing: {
      0: '0',
      px: '1px',
      1: v('s-1'),
      2: v('s-2'),
      3: v('s-3'),
      4: v('s-4'),
      5: v('s-5'),
      6: v('s-6'),
      7: v('s-7'),
      8: v('s-8'),
      gutter: v('gutter')
    },
    borderRadius: { none: '0', 1: v('r-1'), 2: v('r-2'), 3: v('r-3'), dot: v('r-dot') },
    borderColor: {
      DEFAULT: v('rule'),
      2: v('rule-2'),
      edge: v('edge'),
      ink: v('ink'),
      stale: v('stale'),
      error: v('error')
    },
    boxShadow: { none: 'none', 1: v('shadow-1'), 2: v('shadow-2'), 3: v('shadow-3'), focus: v('focus') },
    extend: {
      width: { rail: v('rail-w'), margin: v('margin-w') },
      maxWidth: { main: v('main-max') },
      height: { bar: v('bar-h'), control: v('control-h'), 'control-sm': v('control-h-sm') },
      minHeight: { touch: v('target-touch') },
      gridTemplateColumns: { shell: 'var(--rail-w) minmax(0,1fr)', stage: 'minmax(0,1fr) var(--margin-w)' },
      transitionDuration: { quick: v('t-quick'), step: v('t-step'), redraw: v('t-redraw') },
      transitionTimingFunction: { sedge: v('ease') },
      screens: { tablet: { max: '1180px' }, phone: { max: '560px' } }
    }
  }
} satisfies Config;
