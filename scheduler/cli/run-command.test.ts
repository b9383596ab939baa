import { describe, expect, it } from 'vitest';
import { PUCK_RECORD, spreadAlongManifold } from '../policies/planted-trials.test-data.ts';
import { COMMANDS } from './commands.ts';
import { runCommand } from './run-command.ts';

const trials = spreadAlongManifold(60);
const protocol = {
	aims: { region: { share: 1, escapes: 3 } },
	settle: { minBlocks: 1, maxBlocks: 1 }
};
const state = { day: 1, blockInDay: 1, last: { kind: 'baseline', trials } };

function run(words: string[], input: unknown = {}) {
	return runCommand(words, () => JSON.stringify(input));
}

function runJson(words: string[], input: unknown): unknown {
	const { stdout, stderr, exitCode } = run(words, input);
	expect([exitCode, stderr]).toEqual([0, '']);
	const answer: unknown = JSON.parse(stdout);
	const shape = COMMANDS[words[0] ?? '']?.output.safeParse(answer);
	expect(shape?.error?.issues ?? []).toEqual([]);
	return answer;
}

const OBJECT_OR_CHOICE = expect.toSatisfy(
	(schema: object) => 'properties' in schema || 'anyOf' in schema
);

describe('engine on the command line', () => {
	it('lists its commands without reading anything', () => {
		const never = () => {
			throw new Error('read');
		};
		const { stdout, exitCode } = runCommand(['--help'], never);
		expect(exitCode).toBe(0);
		for (const name of ['outcome', 'cloud', 'gates', 'place-region', 'decide', 'replay']) {
			expect(stdout).toContain(`  ${name} `);
			const schema = JSON.parse(runCommand([name, '--schema'], never).stdout);
			expect(schema.input).toEqual(OBJECT_OR_CHOICE);
			expect(schema.output).toEqual(OBJECT_OR_CHOICE);
		}
	});

	it.each(Object.keys(COMMANDS))('%s has a schema of what goes in and what comes out', (name) => {
		const schema = JSON.parse(runCommand([name, '--schema'], () => '').stdout);
		for (const part of [schema.input, schema.output])
			expect('properties' in part || 'anyOf' in part || 'oneOf' in part).toBe(true);
	});

	it('gives results and hits', () => {
		const task = { ...PUCK_RECORD };
		expect(
			runJson(['outcome'], {
				task,
				trials: [
					[2.486, 0.25],
					[3, 0.25]
				]
			})
		).toMatchObject({
			...{ unit: 'm', trialCount: 2, hitCount: 1, hits: [true, false] }
		});
	});

	it('gives a cloud with its four ellipsoids', { timeout: 30_000 }, () => {
		const cloud = runJson(['cloud'], { task: PUCK_RECORD, trials });
		expect(cloud).toMatchObject({
			n: 60,
			ellipsoids: ['coverage', 'mean', 'nextTrial', 'tolerance'].map((kind) => ({ kind }))
		});
	});

	it('judges the gates', () => {
		expect(runJson(['gates'], { task: PUCK_RECORD, trials })).toMatchObject({ codes: ['OK'] });
	});

	it('places a region', () => {
		const placed = runJson(['place-region'], { task: PUCK_RECORD, trials });
		expect(placed).toMatchObject({ ok: true, region: { share: 0.8 } });
	});

	it('decides and replays', () => {
		const inputs = { state, protocol, task: PUCK_RECORD };
		const stored = runJson(['decide'], inputs);
		expect(stored).toMatchObject({ kind: 'region', engineVersion: expect.any(String) });
		expect(runJson(['replay'], { stored, inputs })).toEqual({ equal: true, sameVersions: true });
		expect(runJson(['replay'], stored)).toEqual({ equal: true, sameVersions: true });
		const altered = { ...Object(stored), kind: 'practice' };
		expect(runJson(['replay'], altered)).toMatchObject({ equal: false, cause: 'answer-differs' });
	});

	it.each([
		[['fly'], {}, /no command “fly”/],
		[['gates', '--fast'], {}, /option “--fast”/],
		[['gates'], { task: PUCK_RECORD, trials: [[1, 2], [1]] }, /trials\[1\]: has 1 values/],
		[['decide'], { state: { day: -1 }, task: PUCK_RECORD }, /state\.day: .*\nstate\.blockInDay: /],
		[['outcome'], { task: { ...PUCK_RECORD, colour: 1 }, trials: [[1, 2]] }, /task: .*colour/],
		[
			['outcome'],
			{ task: { ...FORMULA(), formula: 'a +' }, trials: [[1]] },
			/task\.formula: character 4: the end of the formula/
		]
	])('%s on a bad input ends with 2 and says where', (words, input, message) => {
		const { exitCode, stdout, stderr } = run(words, input);
		expect([exitCode, stdout]).toEqual([2, '']);
		expect(stderr).toMatch(message);
	});

	it('says when the input is not JSON', () => {
		expect(runCommand(['gates'], () => '{')).toMatchObject({ exitCode: 2 });
	});
});

function FORMULA() {
	const variable = { name: 'a', unit: '', min: 0, max: 1, origin: 0, scale: 1 };
	return { type: 'formula', formula: 'a', tolerance: 1, resultUnit: '', variables: [variable] };
}
