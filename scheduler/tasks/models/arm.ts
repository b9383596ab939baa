import { entry, type Vector } from '../../linear-algebra/vector.ts';
import { createSeveralResults, createSingleResult, type ResultModel } from '../result-model.ts';
import type { ArmEndpointRecord, ArmXRecord } from './arm-record.ts';

const RAD_PER_DEG = Math.PI / 180;

/** Where the fingertip is, and how it moves with each joint. */
export interface ArmPosture {
	/** From the shoulder, in the unit of the lengths. */
	readonly tip: readonly [number, number];
	/** (2 × joints), per rad. */
	readonly jacobian: readonly (readonly number[])[];
}

/**
 * Posture of a planar arm of any number of joints, each angle from the link before it.
 *
 * Units:   angles rad; lengths and tip in one unit.
 * Method:  x = Σ lᵢ·cos(q₁ + … + qᵢ), y likewise with sin; a joint moves all links beyond it.
 * Source:  method sheet A6; cases arm-singular and ucm-arm-1d.
 */
export function computeArmPosture(lengths: Vector, angles: Vector): ArmPosture {
	let heading = 0;
	const links = lengths.map((length, i) => {
		heading += entry(angles, i);
		return [length * Math.cos(heading), length * Math.sin(heading)] as const;
	});
	const beyond = (joint: number, axis: 0 | 1) =>
		links.slice(joint).reduce((sum, link) => sum + link[axis], 0);
	return {
		tip: [beyond(0, 0), beyond(0, 1)],
		jacobian: [
			lengths.map((_, joint) => -beyond(joint, 1)),
			lengths.map((_, joint) => beyond(joint, 0))
		]
	};
}

/** Fingertip on a point: two results, one free direction. Source: method sheet A6. */
export function createArmEndpoint({ lengths, target }: ArmEndpointRecord): ResultModel {
	const posture = (x: Vector) => computeArmPosture(lengths, toRad(x));
	return createSeveralResults({
		resultCount: 2,
		results: (x) => posture(x).tip.map((value, axis) => value - entry(target, axis)),
		jacobian: (x) => posture(x).jacobian.map((row) => row.map((slope) => slope * RAD_PER_DEG))
	});
}

/** Only x counts: one result, two free directions. Source: method sheet A6. */
export function createArmX({ lengths, targetX }: ArmXRecord): ResultModel {
	const posture = (x: Vector) => computeArmPosture(lengths, toRad(x));
	return createSingleResult({
		evaluate: (x) => posture(x).tip[0] - targetX,
		gradient: (x) => (posture(x).jacobian[0] ?? []).map((slope) => slope * RAD_PER_DEG)
	});
}

function toRad(x: Vector): number[] {
	return x.map((angle) => angle * RAD_PER_DEG);
}
