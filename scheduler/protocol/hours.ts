import { z } from 'zod';

/** Hours of a rule, up to a year. */
export const hours = z
	.number()
	.min(0)
	.max(24 * 365);
