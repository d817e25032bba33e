import type { Config } from 'tailwindcss';
import plugin from 'tailwindcss/plugin';
import { COLOURS, customProperties } from './src/lib/components/theme/tokens';

const colours = Object.fromEntries(Object.keys(COLOURS).map((name) => [name, `var(--${name})`]));

export default {
	content: ['./src/**/*.{html,svelte,ts}'],
	theme: {
		// Replaces the framework's palette, so that no colour outside the tokens can be written.
		colors: { transparent: 'transparent', current: 'currentColor', inherit: 'inherit', ...colours },
		// Name: [size, line height]. 12 13 14 16 20 28 40 px at the reader's default size.
		fontSize: {
			xs: ['0.75rem', '1rem'],
			sm: ['0.8125rem', '1.125rem'],
			base: ['0.875rem', '1.25rem'],
			md: ['1rem', '1.5rem'],
			lg: ['1.25rem', '1.625rem'],
			xl: ['1.75rem', '2.125rem'],
			'2xl': ['2.5rem', '2.75rem']
		},
		fontFamily: {
			sans: ['Archivo Variable', 'system-ui', 'sans-serif'],
			mono: ['JetBrains Mono Variable', 'ui-monospace', 'monospace']
		},
		borderRadius: { none: '0', sm: '2px', DEFAULT: '3px', full: '999px' }
	},
	plugins: [plugin(({ addBase }) => addBase({ ':root': customProperties() }))]
} satisfies Config;
