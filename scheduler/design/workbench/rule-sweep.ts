import {
	equaliseBlockLengths,
	policySettingsSchema,
	type PolicySettings
} from '../../policies/policy-settings.ts';

/** Settings of a policy that the workbench can move, each alone. */
export const SWEEP_KEYS = [
	'band-quantile',
	'band-wander',
	'block-trials',
	'first-share',
	'relative-escape',
	'first-step',
	'longest-hold',
	'plain-trials',
	'cool-down',
	'settle-blocks'
] as const;
export type SweepKey = (typeof SWEEP_KEYS)[number];

interface Sweep {
	readonly label: string;
	readonly unit: string;
	/** Values that are tried beside the policy's own. */
	readonly values: readonly number[];
	read(policy: PolicySettings): number;
	write(policy: PolicySettings, value: number): unknown;
}

/** Every setting with the values that show what it does. */
export const SWEEPS: Readonly<Record<SweepKey, Sweep>> = {
	'band-quantile': {
		...{ label: 'Dead band, first quantile', unit: '', values: [0.5, 0.8, 0.9, 0.99] },
		read: ({ band }) => band.q1,
		write: (policy, q1) => ({
			...policy,
			band: { ...policy.band, q1, q2: Math.max(q1, policy.band.q2) }
		})
	},
	'band-wander': {
		...{ label: 'Dead band, wander of block means', unit: 'SD', values: [0, 0.05, 0.15, 0.3] },
		read: ({ band }) => band.wander,
		write: (policy, wander) => ({ ...policy, band: { ...policy.band, wander } })
	},
	'block-trials': {
		...{ label: 'Trials per decision', unit: 'trials', values: [20, 30, 40, 60, 90] },
		read: ({ blockTrials }) => blockTrials,
		write: (policy, blockTrials) => ({
			...policy,
			blockTrials,
			limits: { ...policy.limits, trialsPerDay: Math.max(policy.limits.trialsPerDay, blockTrials) }
		})
	},
	'first-share': {
		...{
			label: 'Hardest share of own trials in a region',
			unit: '',
			values: [0.5, 0.6, 0.7, 0.8, 0.9]
		},
		read: ({ place }) => Math.max(...place.shares),
		write: (policy, share) => ({
			...policy,
			place: {
				...policy.place,
				shares: [share, ...policy.place.shares.filter((other) => other < share - 1e-9)]
			}
		})
	},
	'relative-escape': {
		...{ label: 'Relative escape that counts', unit: '', values: [0.1, 0.2, 0.3, 0.5] },
		read: ({ region }) => region.relativeEscape,
		write: (policy, relativeEscape) => ({
			...policy,
			region: { ...policy.region, relativeEscape }
		})
	},
	'first-step': {
		...{ label: 'First step of a shift', unit: 'SD', values: [0.5, 0.75, 1, 1.5] },
		read: ({ shift }) => shift.rule.firstStepSd,
		write: (policy, firstStepSd) =>
			withRule(policy, {
				firstStepSd,
				stepCapSd: Math.max(firstStepSd, policy.shift.rule.stepCapSd)
			})
	},
	'longest-hold': {
		...{ label: 'Longest hold of a step', unit: 'trials', values: [12, 16, 20, 30] },
		read: ({ shift }) => shift.rule.holdMax,
		write: (policy, holdMax) => withRule(policy, { holdMax })
	},
	'plain-trials': {
		...{ label: 'Plain trials before a shift', unit: 'trials', values: [60, 100, 120, 180] },
		read: ({ shift }) => shift.minPlain,
		write: (policy, minPlain) => ({ ...policy, shift: { ...policy.shift, minPlain } })
	},
	'cool-down': {
		...{ label: 'Cool-down', unit: 'trials', values: [0, 40, 80, 120] },
		read: ({ cool }) => cool.trials,
		write: (policy, trials) => ({ ...policy, cool: { ...policy.cool, trials } })
	},
	'settle-blocks': {
		...{
			label: 'Plain blocks before a person counts as settled',
			unit: 'blocks',
			values: [1, 2, 3, 5]
		},
		read: ({ settle }) => settle.minBlocks,
		write: (policy, minBlocks) => ({
			...policy,
			settle: {
				...policy.settle,
				minBlocks,
				use: Math.max(minBlocks, policy.settle.use),
				maxBlocks: Math.max(minBlocks, policy.settle.maxBlocks)
			}
		})
	}
};

function withRule(policy: PolicySettings, change: Partial<PolicySettings['shift']['rule']>) {
	return { ...policy, shift: { ...policy.shift, rule: { ...policy.shift.rule, ...change } } };
}

/** The policy with one setting moved, ready to run: every kind of block has one length. */
export function sweepPolicy(policy: PolicySettings, key: SweepKey, value: number): PolicySettings {
	return equaliseBlockLengths(policySettingsSchema.parse(SWEEPS[key].write(policy, value)));
}

/** Values to try, rising; the policy's own is among them. */
export function listSweepValues(policy: PolicySettings, key: SweepKey): number[] {
	const { values, read } = SWEEPS[key];
	return [...new Set([...values, read(policy)])].sort((a, b) => a - b);
}
