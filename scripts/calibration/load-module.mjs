import { fileURLToPath } from 'node:url';
import { runnerImport } from 'vite';

/** A module of the engine, as it stands in the sources. */
export async function loadModule(path) {
	const root = fileURLToPath(new URL('../..', import.meta.url));
	const { module } = await runnerImport(`${root}${path}`, {
		root,
		configFile: false,
		logLevel: 'error'
	});
	return module;
}
