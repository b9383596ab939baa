import { join } from 'node:path';
import { lastLines } from './debian-packages.mjs';
import { diskFull, isDiskFull, StartFailure } from './failure.mjs';

/**
 * Runs the migrations. Each one is a transaction: a start that was killed here carries on with the
 * first one that is not there yet.
 */
export async function migrate({ folder, env, account, processes }) {
	await runWorker({ name: 'migrate', words: [], folder, env, account, processes });
}

const seedWords = { demo: '--demo', rehearsal: '--rehearse', own: '--empty' };

/**
 * Marks the database and, for the demo, fills it, which takes half a minute and reports as it goes.
 *
 * @returns {Promise<{ people?: { role: string, name: string, email: string }[], setupLink?: string }>} what the seed printed
 */
export async function seed({ variant, folder, env, account, processes, report = () => {} }) {
	const words = [seedWords[variant]];
	const step = { name: 'seed', words, folder, env, account, processes, report };
	const output = await runWorker(step);
	const lines = output.split('\n').filter((line) => line.startsWith('{'));
	return Object.assign({}, ...lines.map((line) => JSON.parse(line)));
}

async function runWorker({ name, words, folder, env, account, processes, report = () => {} }) {
	const script = join(folder, `build/workers/${name}.js`);
	const onErrors = (text) => text.trimEnd().split('\n').forEach(report);
	const options = { cwd: folder, env, account, name, onErrors };
	const { code, output, errors } = await processes.run(
		process.execPath,
		[script, ...words],
		options
	);
	if (code === 0) return output;
	const text = errors || output;
	if (isDiskFull(text)) throw diskFull();
	throw new StartFailure(`${failures[name]}:`, [
		...lastLines(text, 20)
			.split('\n')
			.map((line) => `| ${line}`),
		'The database is as it was before this step. Mend that and start again.'
	]);
}

const failures = {
	migrate: 'The database could not be brought up to date',
	seed: 'The database could not be filled'
};
