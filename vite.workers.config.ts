import { fileURLToPath } from 'node:url';
import { existsSync } from 'node:fs';
import { defineConfig } from 'vite';

const here = (path: string) => fileURLToPath(new URL(path, import.meta.url));
const entries = ['jobs', 'migrate', 'seed', 'mailbox', 'sign-on', 'replay', 'verify-record'];
const input: Record<string, string> = Object.fromEntries(
	entries
		.map((name) => [name, here(`src/worker/${name}.ts`)])
		.filter(([, file]) => existsSync(file as string))
);
if (existsSync(here('scheduler/cli/engine.ts'))) input.engine = here('scheduler/cli/engine.ts');

/** The processes beside the web server: built after it, into build/workers. */
export default defineConfig({
	publicDir: false,
	resolve: { alias: { $lib: here('src/lib'), $scheduler: here('scheduler') } },
	build: {
		ssr: true,
		target: 'node20',
		outDir: 'build/workers',
		emptyOutDir: true,
		rollupOptions: {
			input,
			output: {
				format: 'es',
				entryFileNames: '[name].js',
				chunkFileNames: 'shared/[name]-[hash].js'
			}
		}
	}
});
