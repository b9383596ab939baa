import type { Config } from 'tailwindcss';

/** Colours are CSS variables so that light and dark swap in one place (src/app.css). */
const token = (name: string) => `var(--${name})`;

export default {
	content: ['./src/**/*.{html,svelte,ts}'],
	theme: {
		extend: {
			colors: {
				paper: token('paper'),
				sheet: token('sheet'),
				ink: token('ink'),
				muted: token('muted'),
				rule: token('rule'),
				spruce: token('spruce'),
				'spruce-wash': token('spruce-wash'),
				persimmon: token('persimmon'),
				iris: token('iris'),
				'iris-wash': token('iris-wash'),
				amber: token('amber'),
				rose: token('rose'),
				'rose-wash': token('rose-wash')
			},
			fontFamily: {
				head: ['Bricolage Grotesque Variable', 'system-ui', 'sans-serif'],
				text: ['Atkinson Hyperlegible Next Variable', 'system-ui', 'sans-serif'],
				mono: ['Atkinson Hyperlegible Mono Variable', 'ui-monospace', 'monospace']
			},
			borderRadius: { grip: '10px' }
		}
	}
} satisfies Config;
