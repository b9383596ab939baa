import { checkPolicy, type PolicyConcern } from '$scheduler/policies/check-policy';
import { equaliseBlockLengths, policySettingsSchema } from '$scheduler/policies/policy-settings';
import { buildPolicy } from './build-policy';
import type { Fault } from './fault';
import { hasAdaptiveTime } from './has-adaptive-time';
import type { ProtocolDraft } from './protocol-draft';

type Place = Pick<Fault, 'code' | 'place' | 'field' | 'remedy'>;

const shift = { place: 'Aims, target shift', field: 'aims.shift.isOn' };
/** Where each of the engine's concerns lies, and how to mend it. */
const places: Readonly<Record<PolicyConcern, Place>> = {
	'FIRST-STEP-SMALL': {
		code: 'policy-first-step',
		place: 'Policy, Target shift',
		field: 'policy.shift.rule.firstStepSd',
		remedy: 'Let the first step and the largest be 1 SD or more, or take the aim off.'
	},
	'FEW-PLAIN-TRIALS': {
		code: 'policy-few-plain',
		place: 'Policy, Target shift',
		field: 'policy.shift.minPlain',
		remedy:
			'Ask for 100 plain trials or more, or know that steps may be too large or too small for a person.'
	},
	'LITTLE-LEAKS': {
		code: 'policy-little-leaks',
		place: 'Policy, Placing a region',
		field: 'policy.place.leakMin',
		remedy: 'Let 0.1 or more remain, or know that regions may end without anybody having moved.'
	},
	'FIRST-SHARE-HARD': {
		code: 'policy-share-hard',
		place: 'Policy, Placing a region',
		field: 'policy.place.shares',
		remedy: 'Begin with 0.8 or less, or know that regions may end without anybody having moved.'
	},
	'WASHOUT-SHORT': {
		code: 'policy-washout-short',
		...shift,
		remedy: 'Give adaptive blocks more trials: a washout is as long as they are.'
	},
	'DAY-SHORT': {
		code: 'policy-day-short',
		place: 'Limits',
		field: 'limits.trialsPerVisit',
		remedy: 'Raise the trials a visit, or give adaptive blocks fewer trials.'
	},
	'LENGTHS-DIFFER': {
		code: 'policy-lengths-differ',
		place: 'Policy, Probes, gaps and washout',
		field: 'policy.washoutHolds',
		remedy: 'Leave washout and due blocks as long as adaptive blocks.'
	},
	'HOLD-WITHOUT-FALLBACK': {
		code: 'policy-hold-fallback',
		place: 'Guard rails',
		field: 'guardRails.automaticCoverMax',
		remedy: 'Declare plain practice as what runs meanwhile.'
	}
};

/**
 * What the measured properties of the policy speak against. Operators are always blinded here; blocks of
 * the policy's own take one length when the protocol is frozen, and plain practice runs while a case is
 * held: both are counted in.
 */
export function findPolicyFaults(draft: ProtocolDraft): Fault[] {
	const isAdaptive = draft.arms.some(({ rule }) => rule === 'adaptive');
	if (!hasAdaptiveTime(draft) || !isAdaptive) return [];
	const policy = policySettingsSchema.safeParse(buildPolicy(draft));
	if (!policy.success) return [];
	const { holdFallback = 'practice', ...settings } = equaliseBlockLengths(policy.data);
	const concerns = checkPolicy({ ...settings, holdFallback }, { operatorsAreBlinded: true });
	return concerns.map(({ code, isRefusal, text }) => ({
		...places[code],
		level: isRefusal ? 'fault' : 'caution',
		text
	}));
}
