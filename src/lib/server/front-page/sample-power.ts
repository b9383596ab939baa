import { computePowerCurve } from '$scheduler/power/power-curve.ts';
import { computePowerWithLosses, computeTwoSampleTPower } from '$scheduler/power/two-sample-t.ts';

const test = { effectSize: 0.8, alpha: 0.05, sides: 2 } as const;
const perArm = 30;
const losses = { peopleLossShare: 0.1, effectLossShare: 0.15 };

export interface SamplePower {
	readonly perArm: number;
	readonly effectSize: number;
	readonly peopleLossShare: number;
	readonly effectLossShare: number;
	readonly planned: number;
	readonly withLosses: number;
	readonly curve: readonly { n: number; planned: number; withLosses: number }[];
}

/** Power of an invented two-arm design, as planned and with what studies usually lose. */
export function computeSamplePower(): SamplePower {
	const design = { ...test, n1: perArm, n2: perArm };
	const ns = Array.from({ length: 22 }, (_, index) => 8 + 2 * index);
	return {
		...losses,
		perArm,
		effectSize: test.effectSize,
		planned: computeTwoSampleTPower(design),
		withLosses: computePowerWithLosses(design, losses),
		curve: computePowerCurve({ ...test, losses, ns }).map((point) => ({
			n: point.n,
			planned: point.power,
			withLosses: point.powerWithLosses ?? 0
		}))
	};
}
