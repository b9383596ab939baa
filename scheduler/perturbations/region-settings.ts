import { z } from 'zod';

const share = z.number().gt(0).lt(1);

/**
 * How a penalized region is placed (method sheet D2). Distances are in scaled units unless the name says
 * Sd, which means the person's own standard deviations along the manifold.
 */
export const placementSettingsSchema = z.strictObject({
	/** Shares of own next trials that a region may catch, from the hardest to the easiest. */
	shares: z.array(share).min(1).max(12).default([0.8, 0.7, 0.6, 0.5, 0.4]),
	/** Half width of the cloud carried along the manifold, in its own standard deviations. */
	exitWidth: z.number().positive().default(1.5),
	/** How far along the manifold an exit is looked for. */
	lengthMax: z.number().positive().max(50).default(8),
	step: z.number().gt(0.001).max(1).default(0.02),
	/** Nearest and farthest exit. */
	reachMinSd: z.number().nonnegative().default(1),
	reachMaxSd: z.number().positive().default(4),
	/** Share of trials that must hit outside the region at the exit, absolute and relative to now. */
	successMin: share.default(0.5),
	successRelativeMin: share.default(0.6),
	/** Share of trials that must still succeed if the person does not move at all. */
	leakMin: z.number().min(0).lt(1).default(0.1),
	/** Largest share of the carried cloud beyond the variables' ranges; null: not looked at. */
	edgeMax: share.nullable().default(0.05),
	/** Largest share of the traced manifold inside the region; null: not looked at. */
	coverMax: share.nullable().default(0.6),
	/** Points of the quasi-random sequence behind each probability. */
	pointCount: z.number().int().min(128).max(16384).default(2048)
});

export type PlacementSettings = z.output<typeof placementSettingsSchema>;

const vector = z.array(z.number());

/** A penalized region as it was placed, with what it is expected to do. */
export const placedRegionSchema = z.strictObject({
	center: vector,
	shape: z.array(vector),
	share,
	/** Share of trials that hit outside the region if the cloud stays where it is. */
	stay: z.number().min(0).lt(1),
	centerInUnits: vector,
	/** √k²: the next-trial factor of the share. */
	k: z.number(),
	/** Share of trials that hit without a region. */
	hit0: z.number(),
	/** Arc length of the exit along and against the tangent; null: none on that side. */
	exitPlus: z.number().nullable(),
	exitMinus: z.number().nullable(),
	nearest: z.number(),
	nearestSuccess: z.number(),
	reachSd: z.number(),
	/** How far the center leans away from the mean, in own standard deviations along the manifold. */
	lean: z.number(),
	/** Share of the person's own next trials expected inside. */
	catch: z.number(),
	/** Two free directions: where the nearest exit lies, which its arc length alone does not tell. */
	exitInUnits: vector.optional()
});

/**
 * A region {z: (z − center)ᵀ·shape⁻¹·(z − center) ≤ 1} as a rig runs it: where it lies, for which share,
 * and what leaks out of it; what else was expected of it may be missing, for instance in a yoked arm.
 */
export const regionSchema = placedRegionSchema
	.partial()
	.required({ center: true, shape: true, share: true, stay: true });

export type PlacedRegion = z.output<typeof placedRegionSchema>;
export type Region = z.output<typeof regionSchema>;
