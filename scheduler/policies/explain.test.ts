import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { explainDecision, explainReason } from './explain.ts';
import { POLICY_DEFAULTS } from './policy-settings.ts';
import { REASON_WORDS } from './words/reason-words.ts';
import { AIM_REFUSAL_WORDS } from './words/refusal-words.ts';

const context = { resultUnit: 'm', settings: POLICY_DEFAULTS };

/** Codes of method sheet D0 and D4. */
const SHEET = [
	...['OPERATOR-STOP', 'PAIN', 'DAY-DONE', 'TRIALS-TODAY', 'FATIGUE', 'TRACE', 'OUTLIERS'],
	...['OSCILLATION', 'STUCK', 'NO-ESCAPE', 'BURDEN', 'RETENTION-DUE', 'WASHOUT-DUE'],
	...['PROBE-ESCAPE', 'PROBE-DUE', 'FEW', 'SINGULAR', 'TWO-CLOUDS', 'DRIFT', 'NO-BASELINE', 'OFF'],
	...['CONTINUE-REGION', 'CONTINUE-SHIFT', 'MAINTENANCE', 'FIRST-BLOCKS', 'IMPROVING', 'WORSENING'],
	...['UNDECIDED', 'CHANGED', 'COOL-DOWN', 'UNCHANGED', 'LEAN', 'NO-CHALLENGE', 'SWITCH-AIM'],
	...['AIM-BEHIND', 'ELLIPSOID', 'STAY-WITH-AIM', 'ONLY-AIM', 'REGION-IMPOSSIBLE', 'REGION-ACROSS'],
	...['BIMODAL', 'MODE', 'DRIFT-USED', 'FEW-POOLED', 'ESCAPED', 'SHIFT-HELD', 'SHIFT-FROZEN']
];

/** Codes that the rungs write, read from their source. */
function listWrittenCodes(): string[] {
	const folder = new URL('rungs/', import.meta.url);
	const files = readdirSync(folder).map((file) => readFileSync(new URL(file, folder), 'utf8'));
	const codes = files
		.join('\n')
		.matchAll(/code: '([A-Z-]+)'|(?:stop|hold|practise)\([^']*'([A-Z-]+)'/g);
	return [...codes].map(([, first, second]) => first ?? second ?? '');
}

describe('explainReason', () => {
	it.each([...new Set([...SHEET, ...listWrittenCodes()])])('has a sentence for %s', (code) => {
		expect(Object.keys(REASON_WORDS)).toContain(code);
		const { text } = explainReason({ rung: 'data', code, values: {} }, context);
		expect(text).toMatch(/^[A-Z].*[.]$|^an unknown number/s);
	});

	it('puts the numbers and the unit into the sentence', () => {
		const reason = {
			rung: 'target',
			code: 'OFF',
			values: { fMean: -0.31234, limit: 0.24 }
		} as const;
		expect(explainReason(reason, context).text).toBe(
			'The trials lie beside the target: their mean result is −0.312 m, up to 0.24 m is allowed. Practice first.'
		);
	});

	it('says an unknown code as it is', () => {
		const { text } = explainReason({ rung: 'data', code: 'X', values: {} }, context);
		expect(text).toBe('The engine answered X.');
	});
});

describe('explainDecision', () => {
	it('explains each share, each rung and each refused aim', () => {
		const rung = {
			...{ share: 0.8, k: 1.85, lean: 0, exitPlus: null, exitMinus: -3, staySuccess: 0.04 },
			...{ cover: 0.2, accepted: false, refusal: 'too-little-leaks' as const }
		};
		const { shares, ladder, refused } = explainDecision(
			{
				reasons: [{ rung: 'practice', code: 'NO-CHALLENGE', values: {} }],
				ladder: [
					{ rung: 'limits', code: null },
					{ rung: 'practice', code: 'NO-CHALLENGE' }
				],
				facts: { place: [rung], aims: { lack: {}, refused: { region: 'NO-EXIT', shift: 'MET' } } }
			},
			context
		);
		expect(shares[0]?.text).toBe(
			'A region for 80 % of the trials is refused: only 4 % of the trials would still succeed without moving, 10 % are needed to find the way.'
		);
		expect(ladder.map(({ text }) => text)).toEqual([
			'Yes: no limit is reached.',
			'Neither a penalized region nor a target shift is possible now: practice.'
		]);
		expect(refused.map(({ text }) => text)).toEqual([
			AIM_REFUSAL_WORDS['NO-EXIT'],
			AIM_REFUSAL_WORDS['MET']
		]);
	});
});
