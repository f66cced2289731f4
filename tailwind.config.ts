import type { Config } from 'tailwindcss'

const token = (name: string) => `var(--${name})`
const COLOURS = [
  'paper', 'card', 'line', 'line-strong', 'sunk', 'ink', 'ink-soft', 'on-spruce', 'spruce', 'spruce-deep', 'spruce-wash',
  'brass', 'brass-text', 'brass-wash', 'within', 'outside', 'unclear', 'within-wash', 'outside-wash', 'unclear-wash', 'zone',
  'seg-trunk', 'seg-thigh', 'seg-shank', 'seg-head', 'seg-arm', 'lit-trunk', 'lit-thigh', 'lit-shank', 'lit-head', 'lit-arm',
  'casing', 'core', 'bench', 'bench-up', 'bench-line', 'bench-ink', 'bench-soft', 'bench-brass', 'bench-spruce',
  'bench-within', 'bench-outside', 'bench-unclear',
]

/** Tailwind speaks in the design tokens only: no raw colours, sizes on the 4 px grid. */
export default {
  content: ['./app/**/*.{vue,ts}'],
  darkMode: ['selector', '[data-theme=dark]'],
  theme: {
    colors: { transparent: 'transparent', current: 'currentColor', ...Object.fromEntries(COLOURS.map(name => [name, token(name)])) },
    fontFamily: { sans: 'var(--font)' },
    fontSize: {
      fine: ['var(--t-fine)', 'var(--lh)'], small: ['var(--t-small)', 'var(--lh)'], body: ['var(--t-body)', 'var(--lh)'],
      lead: ['var(--t-lead)', 'var(--lh)'], h3: ['var(--t-h3)', 'var(--lh-tight)'], h2: ['var(--t-h2)', 'var(--lh-tight)'],
      h1: ['var(--t-h1)', 'var(--lh-tight)'], num: ['var(--t-num)', '1'], hero: ['var(--t-hero)', '1'], clock: ['var(--t-clock)', '1'],
    },
    borderRadius: { none: '0', s: 'var(--r-s)', m: 'var(--r-m)', l: 'var(--r-l)', full: 'var(--r-full)' },
    boxShadow: { 1: 'var(--shadow-1)', 2: 'var(--shadow-2)', none: 'none' },
    extend: { minHeight: { target: 'var(--target)' }, minWidth: { target: 'var(--target)' } },
  },
} satisfies Config
