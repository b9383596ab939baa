import { DESIGN_LIMITS } from '../design-limits.ts';
import { countVariables, isPolicyAtWork, readPolicy } from '../design-policy.ts';
import type { Design } from '../design.ts';
import { computeFalseChange, computeFalseEscape } from '../false-trigger.ts';
import type { Check, Finding } from '../finding.ts';
import { POLICY_DEFAULTS, type PolicySettings } from '../../policies/policy-settings.ts';

/** A policy that would act on people who do not change. */
export const checkNoise: Check = (design) => {
	const policy = isPolicyAtWork(design) ? readPolicy(design) : null;
	if (!policy) return [];
	return [...checkBand(design, policy), ...checkEscape(policy), ...checkFirstStep(policy)];
};

const percent = (share: number) => `${Math.round(share * 1000) / 10} %`;

function checkBand(design: Design, { band, blockTrials }: PolicySettings): Finding[] {
	const chance = computeFalseChange({
		...{ band, trialCount: blockTrials, variableCount: countVariables(design) }
	});
	if (chance <= DESIGN_LIMITS.falseChange) return [];
	const { q1, q2, wander } = POLICY_DEFAULTS.band;
	return [
		{
			key: 'noise-rule:band',
			code: 'noise-rule',
			place: {},
			field: 'policy.band',
			numbers: { ...band, trials: blockTrials, chance, limit: DESIGN_LIMITS.falseChange },
			severity: 'serious',
			text: `The dead band (${band.q1}, ${band.q2}, wander ${band.wander} SD) calls ${percent(chance)} of the blocks of ${blockTrials} trials a change in people who do not change; at most ${percent(DESIGN_LIMITS.falseChange)} may be. The rule reacts to noise.`,
			repair: {
				label: `Use the usual band (${q1}, ${q2}, ${wander} SD)`,
				operations: [{ kind: 'set-value', path: ['policy', 'band'], value: { q1, q2, wander } }]
			}
		}
	];
}

function checkEscape({ aims, region, place }: PolicySettings): Finding[] {
	if (!aims.region) return [];
	const chance = computeFalseEscape({
		region,
		stays: [place.leakMin, 1 - Math.max(...place.shares)]
	});
	if (chance <= DESIGN_LIMITS.falseChange) return [];
	const usual = POLICY_DEFAULTS.region;
	return [
		{
			key: 'noise-rule:escape',
			code: 'noise-rule',
			place: {},
			field: 'policy.region',
			numbers: {
				...{ relativeEscape: region.relativeEscape, window: region.window, z: region.z },
				...{ chance, limit: DESIGN_LIMITS.falseChange }
			},
			severity: 'serious',
			text: `A region counts as escaped at a relative escape of ${region.relativeEscape} in ${region.window} trials: ${percent(chance)} of the people who stay where they are would pass; at most ${percent(DESIGN_LIMITS.falseChange)} may. The rule reacts to noise.`,
			repair: {
				label: `Use the usual rule (${usual.relativeEscape} in ${usual.window} trials)`,
				operations: (['relativeEscape', 'window', 'z'] as const).map((name) => ({
					kind: 'set-value',
					path: ['policy', 'region', name],
					value: usual[name]
				}))
			}
		}
	];
}

function checkFirstStep({ aims, shift }: PolicySettings): Finding[] {
	const { firstStepSd, stepCapSd } = shift.rule;
	const step = Math.min(firstStepSd, stepCapSd);
	if (!aims.shift || step >= DESIGN_LIMITS.firstStepSd) return [];
	return [
		{
			key: 'noise-rule:first-step',
			code: 'noise-rule',
			place: {},
			field: 'policy.shift.rule.firstStepSd',
			numbers: { stepSd: step, limit: DESIGN_LIMITS.firstStepSd },
			severity: 'serious',
			text: `The first step of the target is ${step} SD of the person’s own result: more than one person in ten who does not adapt would pass it; it needs ${DESIGN_LIMITS.firstStepSd} SD. The rule reacts to noise.`,
			repair: {
				label: `Make the first step ${DESIGN_LIMITS.firstStepSd} SD`,
				operations: [
					...(firstStepSd < DESIGN_LIMITS.firstStepSd
						? [
								{
									...{
										kind: 'set-value' as const,
										path: ['policy', 'shift', 'rule', 'firstStepSd']
									},
									value: DESIGN_LIMITS.firstStepSd
								}
							]
						: []),
					...(stepCapSd < DESIGN_LIMITS.firstStepSd
						? [
								{
									...{ kind: 'set-value' as const, path: ['policy', 'shift', 'rule', 'stepCapSd'] },
									value: DESIGN_LIMITS.firstStepSd
								}
							]
						: [])
				]
			}
		}
	];
}
