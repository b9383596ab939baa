import adapter from '@sveltejs/adapter-node';
import { vitePreprocess } from '@sveltejs/vite-plugin-svelte';

/** @type {import('@sveltejs/kit').Config} */
const config = {
	preprocess: vitePreprocess(),
	compilerOptions: {
		// Own components are written with runes; packages may still use the older syntax.
		runes: ({ filename }) => (filename.includes('node_modules') ? undefined : true)
	},
	kit: {
		adapter: adapter({ out: 'build' }),
		alias: { $scheduler: 'scheduler', '$scheduler/*': 'scheduler/*' },
		csp: {
			mode: 'auto',
			directives: {
				'default-src': ['self'],
				'script-src': ['self'],
				'font-src': ['self', 'data:'],
				'img-src': ['self', 'data:'],
				'object-src': ['none'],
				'base-uri': ['self'],
				'form-action': ['self'],
				'frame-ancestors': ['none'],
				'connect-src': ['self'],
				// The hash is that of the empty string: the calendar makes an empty <style> and fills it
				// through the CSS object model.
				'style-src': ['self', 'sha256-47DEQpj8HBSa+/TImW+5JCeuQeRkm5NMpJWZG3hSuFU='],
				'style-src-attr': ['unsafe-inline']
			}
		},
		typescript: {
			config(config) {
				config.include.push(
					'../scheduler/**/*.ts',
					'../drizzle.config.ts',
					'../tests/**/*.ts',
					'../tailwind.config.ts'
				);
				return config;
			}
		}
	}
};

export default config;
