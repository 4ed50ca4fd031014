import type { Config } from 'tailwindcss'
import plugin from 'tailwindcss/plugin'
import { type ColourName, dark, light, toChannels } from './assets/tokens'

const variables = (theme: Record<ColourName, string>): Record<string, string> =>
  Object.fromEntries(Object.entries(theme).map(([name, hex]) => [`--${name}`, toChannels(hex)]))

const colours = Object.fromEntries(Object.keys(light).map(name => [name, `rgb(var(--${name}) / <alpha-value>)`]))

export default {
  content: [],
  theme: {
    colors: { ...colours, transparent: 'transparent', current: 'currentColor', white: '#fff', black: '#000' },
    borderRadius: { none: '0', sm: '2px', DEFAULT: '3px', full: '9999px' },
    fontFamily: {
      sans: ['"Archivo Variable"', '"Archivo Fallback"', 'system-ui', 'sans-serif'],
      mono: ['"Red Hat Mono Variable"', '"Red Hat Mono Fallback"', 'ui-monospace', 'monospace'],
    },
    fontSize: {
      'xs': ['0.78125rem', '1.125rem'],
      'sm': ['0.84375rem', '1.25rem'],
      'base': ['0.9375rem', '1.4375rem'],
      // The least size at which a phone does not zoom in on a field.
      'field': ['1rem', '1.5rem'],
      'lg': ['1.0625rem', '1.5rem'],
      'xl': ['1.1875rem', '1.375rem'],
      '2xl': ['1.5rem', '1.75rem'],
      '3xl': ['1.875rem', '2.125rem'],
      '4xl': ['2.25rem', '2.5rem'],
      '5xl': ['3.25rem', '3.375rem'],
    },
    extend: {
      // One thumb, in gloves lent by staff: nothing that is pressed is smaller.
      minHeight: { target: '2.75rem' },
      minWidth: { target: '2.75rem' },
      maxWidth: { page: '77.5rem', text: '42rem' },
    },
  },
  plugins: [
    plugin(({ addBase, addVariant }) => {
      addBase({
        ':root': { 'color-scheme': 'light', ...variables(light) },
        '@media screen and (prefers-color-scheme: dark)': { ':root:not([data-theme="light"])': { 'color-scheme': 'dark', ...variables(dark) } },
        '@media screen': { ':root[data-theme="dark"]': { 'color-scheme': 'dark', ...variables(dark) } },
      })
      addVariant('coarse', '@media (pointer: coarse)')
    }),
  ],
} satisfies Config
