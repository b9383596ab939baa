import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { buildApplication, buildEngine, buildIsCurrent } from './build.mjs';
import { StartFailure } from './failure.mjs';
import { waitForLock } from './lock.mjs';
import { installPackages, packagesAreCurrent } from './node-packages.mjs';

/**
 * Installs and builds what is not up to date. Two starts, or a start and a test run, in the same
 * checkout take turns.
 *
 * @param {{ checkout: string, processes: object, say: (line: string) => void }} context
 * @param {{ build?: 'application' | 'engine' | 'nothing' }} [what]
 */
export async function prepareCheckout(context, { build = 'application' } = {}) {
	const { checkout, processes } = context;
	const isDone = () =>
		packagesAreCurrent(checkout) &&
		build !== 'engine' &&
		(build === 'nothing' || buildIsCurrent(checkout));
	if (isDone()) return;
	const lock = await waitForLock(lockFile(checkout), {
		onWait: ({ pid }) => context.say(`Waiting for process ${pid}, which installs or builds here`),
		isInterrupted: processes.isClosing
	});
	if (!lock) return;
	try {
		await installPackages(checkout, context);
		if (build === 'application') await buildApplication(checkout, context);
		if (build === 'engine') await buildEngine(checkout, context);
	} finally {
		lock.release();
	}
}

function lockFile(checkout) {
	const folder = join(checkout, '.data');
	try {
		mkdirSync(folder, { recursive: true });
		return join(folder, 'prepare.lock');
	} catch (error) {
		if (error.code !== 'EACCES' && error.code !== 'EROFS' && error.code !== 'EPERM') throw error;
		throw new StartFailure(
			`You may not write in ${checkout}, and Ovalry has to be installed there first.`,
			['Start it once as the owner of that folder, or copy the project into a folder of your own.']
		);
	}
}
