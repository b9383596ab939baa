import { describe, expect, it } from 'vitest';
import { FINDING_CODES } from '../../design/finding.ts';
import { faultyDesign, soundDesign } from '../../design/designs.test-data.ts';
import { runCommand } from '../run-command.ts';

function run(input: unknown): { findings: { code: string; key: string }[]; open: number } {
	const { stdout, stderr, exitCode } = runCommand(['check-design'], () => JSON.stringify(input));
	expect([exitCode, stderr]).toEqual([0, '']);
	return JSON.parse(stdout);
}

describe('check-design', () => {
	it('names all twelve faults of a protocol and none of a sound one', () => {
		const codes = run(faultyDesign()).findings.map(({ code }) => code);
		expect([...new Set(codes)].sort()).toEqual([...FINDING_CODES].sort());
		expect(run(soundDesign())).toMatchObject({ findings: [], open: 0 });
	});

	it('counts what is justified in writing as settled', () => {
		const { findings, open } = run(faultyDesign());
		const key = findings[0]?.key ?? '';
		const justified = run({ ...faultyDesign(), justifications: { [key]: 'A pilot.' } });
		expect(justified.open).toBe(open - 1);
		expect(justified.findings[0]).toMatchObject({ key, justification: 'A pilot.' });
	});

	it('takes the file of an export with its rigs', () => {
		const rigs = [{ name: 'Heron', minutesPerVisit: 30, trialsPerVisit: 400 }];
		const found = run({ protocol: { content: soundDesign(), hash: 'x' }, rigs }).findings;
		expect(new Set(found.map(({ code }) => code))).toEqual(new Set(['burden']));
	});
});
