import { execFileSync } from 'node:child_process';
import { rmSync } from 'node:fs';
import { freePort } from '../../scripts/start/ports.mjs';
import {
	copyProject,
	dataFolderOf,
	isRoot,
	isUp,
	npmStart,
	type Account,
	type Checkout,
	type Running,
	type StartOptions
} from './start-harness';

export const idOf = (option: string, name: string) =>
	Number(execFileSync('id', [option, name], { encoding: 'utf8' }));

/** An account that may do nothing in particular; the caller's own where that is not root. */
export const ordinary: Account = isRoot
	? { uid: idOf('-u', 'nobody'), gid: idOf('-g', 'nobody') }
	: {};

/** A checkout and the starts tried in it, one at a time. */
export type StartBench = {
	checkout: Checkout;
	folder: string;
	port: number;
	begin(options?: StartOptions): Running;
	/** Until everything runs; `data` is the folder it said it keeps its data in. */
	beginAndWait(options?: StartOptions): Promise<{ start: Running; data: string }>;
	/** Ends the start under way, if there is one. */
	endStart(): Promise<void>;
	remove(): void;
};

export async function openBench(account: Account, mode = 0o755): Promise<StartBench> {
	const checkout = copyProject(account, mode);
	const port = await freePort();
	const dataFolders = new Set<string>();
	let running: Running | null = null;
	const begin = (options: StartOptions = {}) => {
		const environment = { PORT: String(port), ...options.environment };
		running = npmStart(checkout, { ...options, environment });
		return running;
	};
	return {
		checkout,
		folder: checkout.folder,
		port,
		begin,
		async beginAndWait(options) {
			const start = begin(options);
			await start.until(isUp);
			const data = dataFolderOf(start.output());
			dataFolders.add(data);
			return { start, data };
		},
		async endStart() {
			if (running?.isRunning()) running.pressCtrlC();
			await running?.ended();
			running = null;
		},
		remove() {
			checkout.remove();
			for (const folder of dataFolders) rmSync(folder, { recursive: true, force: true });
		}
	};
}
