import { z } from 'zod';
import {
	gravity,
	positive,
	resultUnit,
	tolerance,
	variable,
	variableSchema
} from '../task-variable.ts';

const target = {
	D: positive.default(5).describe('distance of the target plane, m'),
	H: z.number().default(1.2).describe('height of the target, m'),
	g: gravity
};
const speed = variable('v_m_s', 'm/s', [3, 12], [6.8, 0.25]);
const angle = variable('theta_deg', 'deg', [5, 75], [35, 3]);
const triple = z.array(variableSchema).length(3);

/** Drag-free throw whose release height is a variable too: speed, angle, height; one result. */
export const throwHeightRecordSchema = z.strictObject({
	type: z.literal('throw-height'),
	...target,
	tolerance: tolerance.default(0.25),
	resultUnit: resultUnit.default('m'),
	variables: triple.prefault(() => [speed, angle, variable('h_m', 'm', [1.2, 2], [1.6, 0.05])])
});

/**
 * Drag-free throw with a direction to the side: speed, angle of elevation, azimuth; two results, the miss
 * to the side and the miss in height at the target plane.
 */
export const throwAzimuthRecordSchema = z.strictObject({
	type: z.literal('throw-azimuth'),
	h: z.number().default(1.6).describe('release height, m'),
	...target,
	side: z.number().default(0).describe('place of the target to the side, m'),
	tolerance: tolerance.default(0.25),
	resultUnit: resultUnit.default('m'),
	variables: triple.prefault(() => [speed, angle, variable('phi_deg', 'deg', [-30, 30], [0, 1.5])])
});

export type ThrowHeightRecord = z.output<typeof throwHeightRecordSchema>;
export type ThrowAzimuthRecord = z.output<typeof throwAzimuthRecordSchema>;
