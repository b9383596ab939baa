import type { PowerCurveData } from '$lib/charts/power-curve';
import { wantedPower, type PowerAssumptions, type PowerCurvePoints } from '$lib/power/power-report';
import { whatIfSchema, type WhatIf } from '$lib/power/what-if';

type Values = Record<keyof WhatIf, number | null>;

/** What stands in the fields: the plan, or what was asked for in the address. */
export function tryValues(plan: PowerAssumptions | null, asked: WhatIf): Values {
	const share = (value: number | undefined) =>
		value === undefined ? null : Math.round(value * 1e4) / 100;
	return {
		n: asked.n ?? plan?.peoplePerArm ?? null,
		d: asked.d ?? plan?.effectD ?? null,
		alpha: asked.alpha ?? plan?.alpha ?? null,
		people: asked.people ?? share(plan?.peopleLostShare),
		effect: asked.effect ?? share(plan?.effectLostShare)
	};
}

/** The fields' values that make sense; the plan stands in for the others. */
export function usableWhatIf(values: Values): WhatIf {
	const typed = Object.entries(values).map(([key, value]) => [key, value ?? '']);
	return whatIfSchema.parse(Object.fromEntries(typed));
}

type Picture = { points: PowerCurvePoints; tableAt: number[] };

/** The two lines of the picture with their words. */
export function describePicture(
	{ peoplePerArm }: PowerAssumptions,
	{ points, tableAt }: Picture,
	isTried: boolean
): PowerCurveData {
	const lost = points.flatMap(({ n, powerWithLosses }) =>
		powerWithLosses === null ? [] : [{ n, power: powerWithLosses }]
	);
	return {
		curves: [
			{
				key: 'planned',
				label: isTried ? 'tried' : 'as planned',
				name: 'no losses',
				tone: 'ink',
				style: 'solid',
				points
			},
			{
				key: 'losses',
				label: 'with both losses',
				name: 'both losses',
				tone: 'persimmon',
				style: 'dashed',
				points: lost
			}
		],
		marker: {
			n: peoplePerArm,
			label: `${isTried ? 'tried' : 'planned'}: ${peoplePerArm} per arm`
		},
		wanted: wantedPower,
		xLabel: 'people per arm at the start',
		tableAt
	};
}
