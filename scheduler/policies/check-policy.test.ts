import { describe, expect, it } from 'vitest';
import { checkPolicy } from './check-policy.ts';
import {
	equaliseBlockLengths,
	policySettingsSchema,
	type PolicySettingsInput
} from './policy-settings.ts';

const codes = (input: PolicySettingsInput, operatorsAreBlinded = false) =>
	checkPolicy(policySettingsSchema.parse(input), { operatorsAreBlinded }).map(({ code }) => code);

describe('checkPolicy', () => {
	it('has nothing to say about the product defaults', () => {
		expect(codes({})).toEqual([]);
	});

	it('refuses a first step that people who do not adapt would pass', () => {
		const [found] = checkPolicy(
			policySettingsSchema.parse({ shift: { rule: { firstStepSd: 0.5 } } }),
			{ operatorsAreBlinded: false }
		);
		expect(found).toMatchObject({ code: 'FIRST-STEP-SMALL', isRefusal: true });
	});

	it('looks at shift and region only where they are aims', () => {
		const bad = { shift: { minPlain: 20 }, place: { leakMin: 0.03, shares: [0.9] } };
		expect(codes({ ...bad, aims: { region: { share: 1 } } })).toEqual([
			'LITTLE-LEAKS',
			'FIRST-SHARE-HARD'
		]);
		expect(codes({ ...bad, aims: { shift: { share: 1, goal: 2 } } })).toEqual(['FEW-PLAIN-TRIALS']);
	});

	it('wants one length and a fallback where operators are blinded', () => {
		expect(codes({}, true)).toEqual(['LENGTHS-DIFFER', 'HOLD-WITHOUT-FALLBACK']);
		const settings = equaliseBlockLengths(policySettingsSchema.parse({ holdFallback: 'practice' }));
		expect(checkPolicy(settings, { operatorsAreBlinded: true })).toEqual([]);
	});

	it('says when a washout is short and a day holds no block', () => {
		expect(codes({ washoutTrials: 30, limits: { trialsPerDay: 30 } })).toEqual([
			...['WASHOUT-SHORT', 'DAY-SHORT']
		]);
		expect(codes({ washoutTrials: 30, washoutHolds: 3 })).toEqual([]);
	});
});
