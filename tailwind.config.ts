import type { Config } from 'tailwindcss';

/** Colours are CSS variables so that light and dark swap in one place (src/app.css). */
const token = (name: string) => `var(--${name})`;

const tokens = [
	'paper',
	'sheet',
	'plot',
	'ink',
	'muted',
	'rule',
	'edge',
	'spruce',
	'spruce-wash',
	'spruce-tint',
	'on-spruce',
	'persimmon',
	'persimmon-wash',
	'iris',
	'iris-wash',
	'amber',
	'amber-wash',
	'rose',
	'rose-wash',
	'on-rose'
];

export default {
	content: ['./src/**/*.{html,svelte,ts}'],
	theme: {
		extend: {
			colors: Object.fromEntries(tokens.map((name) => [name, token(name)])),
			fontFamily: {
				head: ['Bricolage Grotesque Variable', 'system-ui', 'sans-serif'],
				text: ['Atkinson Hyperlegible Next Variable', 'system-ui', 'sans-serif'],
				mono: ['Atkinson Hyperlegible Mono Variable', 'ui-monospace', 'monospace']
			},
			/** Sizes follow the reader's own font size; the phone's body is a step larger (app.css). */
			fontSize: {
				page: ['var(--size-page)', { lineHeight: '1.12', fontWeight: '700' }],
				part: ['1.0625rem', { lineHeight: '1.3', fontWeight: '650' }],
				note: ['0.96875rem', { lineHeight: '1.3', fontWeight: '600' }],
				body: ['var(--size-body)', { lineHeight: '1.45' }],
				fine: ['var(--size-fine)', { lineHeight: '1.45' }],
				tiny: ['0.78125rem', { lineHeight: '1.35' }]
			},
			borderRadius: { grip: '10px' }
		}
	}
} satisfies Config;
