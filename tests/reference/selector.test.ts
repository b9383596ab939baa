import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { caseFileSchema, verifyCases } from '../../scheduler/cli/verify/verify-cases.ts';

/**
 * Planted histories by way of the command `verify`; expected values by the method sheet's own
 * prototype, see data/README-engine.md.
 */
const file = caseFileSchema.parse(
	JSON.parse(readFileSync(new URL('data/selector-cases.json', import.meta.url), 'utf8'))
);
const titles = file.cases.map(({ id, ...example }, index) => {
	const shows = z.string().parse(Reflect.get(example, 'shows'));
	return { id, shows, index };
});

describe('chooseNextBlock on planted histories', () => {
	it('has all 13', () => {
		expect(titles).toHaveLength(13);
	});

	it.each(titles)('$id: $shows', ({ id, index }) => {
		const example = file.cases[index];
		const { verdicts } = verifyCases({ ...file, cases: example ? [example] : [] });
		expect(verdicts).toEqual([{ id, verdict: 'pass', faults: [], note: null }]);
	});
});
