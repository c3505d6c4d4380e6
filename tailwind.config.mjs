/** A named colour whose channels come from `src/styles/colours.css`, so that the dark theme keeps the same names. */
const named = (name) => `rgb(var(--${name}) / <alpha-value>)`;

/** @type {import('tailwindcss').Config} */
export default {
  content: ['./src/**/*.{astro,ts,tsx}'],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      ...Object.fromEntries(
        ['paper', 'sheet', 'ink', 'ink-soft', 'rule', 'sapwood', 'heartwood', 'crayon', 'moss', 'amber', 'bark'].map((name) => [name, named(name)]),
      ),
    },
    fontFamily: {
      slab: ['"Zilla Slab"', 'Rockwell', 'Georgia', 'serif'],
      sans: ['"Atkinson Hyperlegible Next"', 'Verdana', 'system-ui', 'sans-serif'],
      mono: ['"Atkinson Hyperlegible Mono"', 'ui-monospace', 'Menlo', 'monospace'],
    },
    fontSize: {
      xs: ['0.8125rem', '1.125rem'],
      sm: ['0.875rem', '1.3125rem'],
      base: ['1rem', '1.5rem'],
      lg: ['1.1875rem', '1.75rem'],
      xl: ['1.375rem', '1.875rem'],
      '2xl': ['1.625rem', '2.125rem'],
      '3xl': ['2.125rem', '2.5rem'],
      '4xl': ['2.5rem', '2.875rem'],
      '5xl': ['3.625rem', '4.0625rem'],
    },
    borderRadius: { none: '0', DEFAULT: '4px', full: '9999px' },
    boxShadow: { none: 'none', offset: '5px 5px 0 rgb(var(--sapwood))' },
    extend: {
      // A finger's width at a desk, a glove's on the milling day.
      minHeight: { target: '44px', glove: '56px' },
      minWidth: { target: '44px', glove: '56px' },
      maxWidth: { page: '76rem', prose: '42rem', form: '36rem' },
      screens: { phone: { max: '639px' } },
    },
  },
};
