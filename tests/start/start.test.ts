import { statSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { idOf, openBench, ordinary, type StartBench } from './start-bench';
import { isRoot, msUntilGone, processesOf, type Account } from './start-harness';

type Situation = { who: string; account: Account; mode: number };

const situations: Situation[] = [
	{ who: 'an ordinary user', account: ordinary, mode: 0o755 },
	...(isRoot
		? [
				{ who: 'root, in a folder that others can read', account: {}, mode: 0o755 },
				{ who: 'root, in a folder shut to others', account: {}, mode: 0o700 }
			]
		: [])
];

describe.each(situations)('npm start as $who', ({ account, mode }) => {
	let bench: StartBench;
	beforeAll(async () => void (bench = await openBench(account, mode)));
	afterEach(() => bench.endStart());
	afterAll(() => bench.remove());

	it('runs an empty lab, and Ctrl-C ends all of it within three seconds', async () => {
		const { start, data } = await bench.beginAndWait({ words: ['--empty'] });
		expect(start.output()).toMatch(/Set up your lab +http:\/\/localhost:\d+\/setup\/[\w-]{40,}/);
		expect(processesOf(data).length).toBeGreaterThanOrEqual(4);
		start.pressCtrlC();
		expect(await msUntilGone(data)).toBeLessThan(3_000);
		await start.ended();
	});

	it('runs nothing as root but itself, and shuts keys and secrets', async () => {
		const { data } = await bench.beginAndWait({ words: ['--empty'] });
		expect(processesOf(data).filter(({ uid }) => uid === 0)).toEqual([]);
		expect(statSync(join(data, 'secrets.json')).mode & 0o777).toBe(0o600);
		for (const name of ['cluster', 'own/keys', 'own/mailbox']) {
			expect(statSync(join(data, name)).mode & 0o777).toBe(0o700);
		}
		if (!isRoot || account.uid !== undefined) return;
		const uidOf = (word: string) =>
			processesOf(data).find(({ command }) => command.includes(word))?.uid;
		expect(uidOf('/bin/postgres ')).toBe(idOf('-u', 'postgres'));
		for (const word of ['build/index.js', 'jobs.js', 'mailbox.js'])
			expect(uidOf(word)).toBe(idOf('-u', 'ovalry'));
	});

	it('makes the demo, and the second time takes seconds', async () => {
		const first = await bench.beginAndWait();
		expect(first.start.output()).toContain('the demo');
		first.start.pressCtrlC();
		await first.start.ended();
		const begun = Date.now();
		const second = await bench.beginAndWait();
		expect(second.start.output()).not.toContain('Making the demo');
		expect(second.start.output()).not.toContain('Copying');
		// Two to three seconds on a computer at rest; the bound leaves room for a busy one, while the
		// build (or the packages) alone would take longer.
		expect(Date.now() - begun).toBeLessThan(30_000);
	});

	it('ends with npm, however npm is ended', async () => {
		for (const signal of ['SIGTERM', 'SIGKILL'] as const) {
			const { start, data } = await bench.beginAndWait();
			start.child.kill(signal);
			expect(await msUntilGone(data)).toBeLessThan(3_500);
			await start.ended();
		}
	});
});
