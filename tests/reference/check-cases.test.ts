import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
	caseFileSchema,
	verifyCases,
	type Verdict
} from '../../scheduler/cli/verify/verify-cases.ts';

/**
 * Every numbered case of the method sheet at its own tolerance, by way of the command `verify`; the
 * source of each value stands in the case.
 */
const file = caseFileSchema.parse(
	JSON.parse(readFileSync(new URL('data/reference-values.json', import.meta.url), 'utf8'))
);

function verify(index: number): Verdict | undefined {
	const example = file.cases[index];
	return verifyCases({ ...file, cases: example ? [example] : [] }).verdicts[0];
}

describe('numbered cases of the method sheet', () => {
	it('holds all 85', () => {
		expect(new Set(file.cases.map(({ id }) => id)).size).toBe(85);
	});

	it.each(file.cases.map(({ id }, index) => [id, index] as const))(
		'%s',
		{ timeout: 60_000 },
		(_id, index) => {
			const got = verify(index);
			expect(got?.verdict, JSON.stringify(got)).toBe('pass');
		}
	);
});
