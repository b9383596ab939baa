import { checkPolicy, type PolicyConcern } from '$scheduler/policies/check-policy';
import { equaliseBlockLengths, policySettingsSchema } from '$scheduler/policies/policy-settings';
import { buildPolicy } from './build-policy';
import type { Fault } from './fault';
import { hasAdaptiveTime } from './has-adaptive-time';
import type { ProtocolDraft } from './protocol-draft';

type Place = Pick<Fault, 'code' | 'place' | 'field' | 'remedy'>;

const shift = { place: 'Aims, target shift', field: 'aims.shift.isOn' };
const region = { place: 'Aims, penalized regions', field: 'aims.region.isOn' };
const kept =
	'The setting came with the version that this draft goes on from and has no field: mend it there, or';

/** Where each of the engine's concerns lies, and how to mend it. */
const places: Readonly<Record<PolicyConcern, Place>> = {
	'FIRST-STEP-SMALL': {
		code: 'policy-first-step',
		...shift,
		remedy: `${kept} take the aim off.`
	},
	'FEW-PLAIN-TRIALS': {
		code: 'policy-few-plain',
		...shift,
		remedy: `${kept} know that steps may be too large or too small for a person.`
	},
	'LITTLE-LEAKS': {
		code: 'policy-little-leaks',
		...region,
		remedy: `${kept} know that regions may end without anybody having moved.`
	},
	'FIRST-SHARE-HARD': {
		code: 'policy-share-hard',
		...region,
		remedy: `${kept} know that regions may end without anybody having moved.`
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
		place: 'Aims, blocks that are due',
		field: 'aims.region.isOn',
		remedy: `${kept} give adaptive blocks the length of the blocks that are due.`
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
