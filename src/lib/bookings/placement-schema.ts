import { z } from 'zod';

/** Where visits are to be, as a form or the calendar sends them. */
export const placementSchema = z.object({
	visitNumber: z.number().int().min(1),
	startMs: z.number().int(),
	rigId: z.uuid(),
	staffId: z.uuid().optional()
});
export type PlacementInput = z.infer<typeof placementSchema>;

export const placesSchema = z.array(placementSchema).min(1).max(40);

/** A choice in a form: the places as JSON, and the plan's version they were worked out on. */
export const chosenPlacesSchema = z.object({
	places: z
		.string()
		.transform((text, context) => {
			try {
				return JSON.parse(text) as unknown;
			} catch {
				context.addIssue({ code: 'custom', message: 'Choose a place first' });
				return z.NEVER;
			}
		})
		.pipe(placesSchema),
	planVersion: z.coerce.number().int()
});
