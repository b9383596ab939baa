import { checkNumber, checkText, faultAt, type Fault } from './fault';
import type { ProtocolDraft } from './protocol-draft';

const place = 'Primary comparison';

/** What is wrong with the comparison that the study is powered for; one arm has none. */
export function findComparisonFaults({ arms, comparison }: ProtocolDraft): Fault[] {
	if (arms.length < 2) return [];
	return [
		...checkText({
			value: comparison.outcome,
			place,
			field: 'comparison.outcome',
			name: 'The outcome',
			remedy: 'Name what is measured, such as “Mean absolute error at retention”.'
		}),
		...findArmFaults(arms, comparison),
		...findNumberFaults(comparison),
		...findSourceCautions(comparison)
	];
}

type Comparison = ProtocolDraft['comparison'];

function findArmFaults(arms: ProtocolDraft['arms'], { armA, armB }: Comparison): Fault[] {
	const isKnown = (key: string) => arms.some((arm) => arm.key === key);
	const where = { place, field: 'comparison.armA' };
	if (!isKnown(armA) || !isKnown(armB)) {
		const text = 'The two arms that are compared are not chosen.';
		return [faultAt('comparison-arms', where, text, 'Choose two arms.')];
	}
	if (armA !== armB) return [];
	return [faultAt('comparison-same-arm', where, 'An arm is compared with itself.', 'Choose two.')];
}

function findNumberFaults(comparison: Comparison): Fault[] {
	const rules = [
		['effectD', 'Effect d', 0.01, 5],
		['alpha', 'Alpha', 0.0001, 0.5],
		['peopleLostShare', 'Share of people lost', 0, 0.95],
		['effectLostShare', 'Share of the effect lost', 0, 0.95]
	] as const;
	return [
		...rules.flatMap(([name, label, min, max]) =>
			checkNumber({
				value: comparison[name],
				place,
				field: `comparison.${name}`,
				name: label,
				min,
				max
			})
		),
		...checkNumber({
			value: comparison.peoplePerArm,
			place,
			field: 'comparison.peoplePerArm',
			name: 'People per arm',
			min: 2,
			max: 5000,
			isWhole: true
		})
	];
}

function findSourceCautions({ effectSource }: Comparison): Fault[] {
	if (effectSource.trim() !== '') return [];
	return [
		{
			code: 'effect-unsourced',
			level: 'caution',
			place,
			field: 'comparison.effectSource',
			text: 'The effect has no source.',
			remedy: 'Say where it comes from: a pilot, a study, the smallest effect that would matter.'
		}
	];
}
