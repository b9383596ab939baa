import { describe, expect, it } from 'vitest';
import { POLICY_DEFAULTS } from '../../policies/policy-settings.ts';
import { COURSE_TASK } from '../../simulation/course-groups.ts';
import {
	ruleExperimentSchema,
	runExample,
	runRuleJob,
	type RuleOutcome
} from './rule-experiment.ts';
import { listSweepValues, SWEEP_KEYS, SWEEPS, sweepPolicy } from './rule-sweep.ts';
import { summariseRule } from './summarise-rule.ts';

const experiment = ruleExperimentSchema.parse({
	...{ task: COURSE_TASK, policy: {}, sweep: 'band-quantile', values: [0.99], people: 8 },
	...{ kind: 'exploring', lagOne: 0, days: 4, blocksPerDay: 4, gapHours: 23, seed: 40 }
});
const both = { region: true, shift: true };

function run(people: number, change: object = {}): RuleOutcome[] {
	const changed = { ...experiment, ...change };
	return Array.from({ length: people }, (_, person) =>
		runRuleJob(changed, { value: changed.values[0] ?? 0, person })
	);
}

describe('the workbench', { timeout: 120_000 }, () => {
	it('finds for the usual rule what CALIBRATION.md says', () => {
		const [point] = summariseRule([0.99], run(8), both);
		// Selector on people who do not change, long cloud, lag-1 0: .010 of the blocks; goal at most .05.
		expect(point?.falseChange?.of).toBeGreaterThan(60);
		expect(point?.falseChange?.low).toBeLessThan(0.01);
		expect(point?.falseChange?.share).toBeLessThan(0.06);
		// Shift rule, does not adapt, lag-1 0: .063 of 2000 people; here 160, three standard errors of .019.
		expect(point?.falseStep?.of).toBe(160);
		expect(Math.abs((point?.falseStep?.share ?? 1) - 0.063)).toBeLessThan(0.058);
		// Courses side by side, exploring people: they escape, and nobody has to be looked at.
		expect(point?.escaped?.share).toBeGreaterThan(0.5);
		expect(point?.holds?.share).toBeLessThan(0.05);
	});

	it('lets a loose band change its mind more often', () => {
		const [loose] = summariseRule([0.5], run(3, { values: [0.5] }), both);
		const [usual] = summariseRule([0.99], run(3), both);
		expect(loose?.falseChange?.share).toBeGreaterThan((usual?.falseChange?.share ?? 1) + 0.1);
	});

	it('gives each person the same outcome whoever else is run, and in which order', () => {
		const jobs = [2, 0, 1].map((person) => ({ value: 0.99, person }));
		const backwards = jobs.map((job) => runRuleJob(experiment, job));
		const forwards = run(3);
		const byPerson = (outcomes: RuleOutcome[]) => outcomes.toSorted((a, b) => a.person - b.person);
		expect(byPerson(backwards)).toEqual(forwards);
		expect(summariseRule([0.99], backwards, both)).toEqual(summariseRule([0.99], forwards, both));
	});

	it('steps through the very person that was counted', () => {
		const [outcome] = run(1);
		const steps = runExample(experiment, { value: 0.99, person: 0 });
		expect(steps).toHaveLength(outcome?.decisions ?? 0);
		expect(steps[0]?.decision.kind).toBe('baseline');
		expect(steps[0]?.trials).toHaveLength(60);
		expect(steps.every(({ decision }) => decision.reasons.length > 0)).toBe(true);
	});

	it('says nothing of what nobody did', () => {
		expect(summariseRule([0.99], [], both)).toEqual([
			{
				...{ value: 0.99, people: 0, falseChange: null, falseStep: null, escaped: null },
				...{ escapeTrials: null, followed: null, followTrials: null, holds: null }
			}
		]);
	});
});

describe('a setting that is moved', () => {
	it.each(SWEEP_KEYS)('is read as it was written: %s', (key) => {
		for (const value of SWEEPS[key].values) {
			expect(SWEEPS[key].read(sweepPolicy(POLICY_DEFAULTS, key, value))).toBe(value);
		}
		expect(listSweepValues(POLICY_DEFAULTS, key)).toContain(SWEEPS[key].read(POLICY_DEFAULTS));
	});

	it('leaves the policy as it is deployed where its own value stands', () => {
		const own = POLICY_DEFAULTS.band.q1;
		const { probeTrials, washoutTrials, retentionTrials, recoveryTrials, ...same } = sweepPolicy(
			...([POLICY_DEFAULTS, 'band-quantile', own] as const)
		);
		expect(POLICY_DEFAULTS).toMatchObject(same);
		expect([probeTrials, washoutTrials, retentionTrials, recoveryTrials]).toEqual([60, 60, 60, 60]);
	});
});
