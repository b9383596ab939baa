import { z } from 'zod';

/** A date and time of the lab's clock, as a browser's own field writes it. */
export const clockSchema = z.object({
	local: z
		.string()
		.trim()
		.refine(
			(text) =>
				/^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}$/.test(text) && !Number.isNaN(Date.parse(`${text}Z`)),
			'Write a date and a time, such as 2027-03-12T08:00.'
		)
});
