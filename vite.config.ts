import { sveltekit } from '@sveltejs/kit/vite';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig } from 'vitest/config';

/** Tests that start the built application on a database of their own. */
const onServers = {
	globalSetup: ['tests/support/database-setup.ts'],
	testTimeout: 600_000,
	hookTimeout: 600_000,
	maxWorkers: 2
};

export default defineConfig({
	plugins: [tailwindcss(), sveltekit()],
	server: { host: '127.0.0.1', port: 5173 },
	test: {
		projects: [
			project('unit', ['src/**/*.test.ts', 'scheduler/**/*.test.ts']),
			project('reference', ['tests/reference/**/*.test.ts']),
			project('architecture', ['tests/architecture/**/*.test.ts'], { testTimeout: 60_000 }),
			project('integration', ['tests/integration/**/*.test.ts'], {
				globalSetup: ['tests/support/database-setup.ts'],
				testTimeout: 60_000,
				hookTimeout: 120_000
			}),
			project('e2e', ['tests/e2e/**/*.test.ts'], onServers),
			// Long: `npm run test:blinding`, `npm run test:pages`, `npm run test:start`
			project('pages', ['tests/pages/**/*.test.ts'], onServers),
			project('blinding', ['tests/blinding/**/*.test.ts'], onServers),
			project('start', ['tests/start/**/*.test.ts'], {
				testTimeout: 600_000,
				hookTimeout: 300_000,
				fileParallelism: false
			})
		]
	}
});

function project(name: string, include: string[], more: Record<string, unknown> = {}) {
	return { extends: true as const, test: { name, include, environment: 'node', ...more } };
}
