import { computePowerCurve } from '$scheduler/power/power-curve';
import { findRequiredN } from '$scheduler/power/required-n';
import {
	computePowerWithLosses,
	computeTwoSampleTPower,
	type Losses,
	type TwoSampleDesign
} from '$scheduler/power/two-sample-t';

/** What the power of the primary comparison follows from. */
export type PowerAssumptions = {
	peoplePerArm: number;
	effectD: number;
	alpha: number;
	sides: 1 | 2;
	peopleLostShare: number;
	effectLostShare: number;
};

export type PowerRow = {
	key: 'planned' | 'people-lost' | 'effect-lost' | 'both' | 'none';
	name: string;
	/** Null when the losses leave fewer than two people in an arm. */
	power: number | null;
	/** Difference from the plan; null for the plan itself and where there is no power. */
	toll: number | null;
};

/** The power wanted by custom, to which plans are compared. */
export const wantedPower = 0.8;

/** Closed-form power as planned, after each loss, after both, and when there is no effect. */
export function listPowerRows(assumptions: PowerAssumptions): PowerRow[] {
	const { peopleLostShare, effectLostShare } = assumptions;
	const design = designOf(assumptions);
	const planned = computeTwoSampleTPower(design);
	const after = (peopleLossShare: number, effectLossShare: number) =>
		powerAfter(design, { peopleLossShare, effectLossShare });
	const row = (key: PowerRow['key'], name: string, power: number | null): PowerRow => ({
		key,
		name,
		power,
		toll: power === null ? null : power - planned
	});
	return [
		{ ...row('planned', 'as planned', planned), toll: null },
		row('people-lost', `${percent(peopleLostShare)} of people lost`, after(peopleLostShare, 0)),
		row('effect-lost', `${percent(effectLostShare)} of the effect lost`, after(0, effectLostShare)),
		row('both', 'both', after(peopleLostShare, effectLostShare)),
		{
			...row('none', 'no effect at all', computeTwoSampleTPower({ ...design, effectSize: 0 })),
			toll: null
		}
	];
}

export type PowerCurvePoints = { n: number; power: number; powerWithLosses: number | null }[];

/** The curve around the plan, and the people per arm that stand in its table. */
export function computePowerPicture(assumptions: PowerAssumptions): {
	points: PowerCurvePoints;
	tableAt: number[];
} {
	const { peoplePerArm, effectD, alpha, sides } = assumptions;
	const required = findRequiredN({ effectSize: effectD, power: wantedPower, alpha, sides });
	const wanted = required.ok ? Math.min(required.n1, 5 * peoplePerArm) : peoplePerArm;
	const last = Math.max(12, Math.ceil((1.5 * Math.max(peoplePerArm, wanted)) / 4) * 4);
	const step = Math.max(1, Math.ceil(last / 60));
	const first = Math.max(2, Math.min(4, peoplePerArm));
	const ns = new Set([peoplePerArm, last]);
	for (let n = first; n <= last; n += step) ns.add(n);
	const sorted = [...ns].sort((a, b) => a - b);
	const points = computePowerCurve({
		effectSize: effectD,
		alpha,
		sides,
		losses: lossesOf(assumptions),
		ns: sorted
	});
	return { points, tableAt: chooseColumns(sorted, peoplePerArm) };
}

/** About eight counts of people, the plan among them. */
function chooseColumns(ns: readonly number[], plan: number): number[] {
	const stride = Math.max(1, Math.ceil(ns.length / 7));
	const chosen = ns.filter((_, index) => index % stride === 0);
	const last = ns.at(-1) ?? plan;
	return [...new Set([...chosen, plan, last])].sort((a, b) => a - b);
}

/** People per arm to enrol for the wanted power, without losses and with them; null beyond reach. */
export function findPeopleNeeded(assumptions: PowerAssumptions): {
	planned: number | null;
	withLosses: number | null;
} {
	const { effectD, alpha, sides } = assumptions;
	const find = (losses?: Losses) => {
		const options = { effectSize: effectD, power: wantedPower, alpha, sides };
		const found = findRequiredN(losses ? { ...options, losses } : options);
		return found.ok ? found.n1 : null;
	};
	return { planned: find(), withLosses: find(lossesOf(assumptions)) };
}

export function designOf({
	effectD,
	peoplePerArm,
	alpha,
	sides
}: PowerAssumptions): TwoSampleDesign {
	return { effectSize: effectD, n1: peoplePerArm, n2: peoplePerArm, alpha, sides };
}

export function lossesOf({ peopleLostShare, effectLostShare }: PowerAssumptions): Losses {
	return { peopleLossShare: peopleLostShare, effectLossShare: effectLostShare };
}

function powerAfter(design: TwoSampleDesign, losses: Losses): number | null {
	const left = Math.min(design.n1, design.n2) * (1 - losses.peopleLossShare);
	return left < 2 ? null : computePowerWithLosses(design, losses);
}

/** 0.15 as '15 %'. */
export function percent(share: number): string {
	return `${Math.round(share * 1000) / 10} %`;
}

/** 0.8614 as '.861', to as many digits as asked for. */
export function showPower(power: number | null, digits = 3): string {
	if (power === null) return '–';
	return power.toFixed(digits).replace(/^(-?)0\./, '$1.');
}
