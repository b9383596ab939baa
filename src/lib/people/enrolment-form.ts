import { z } from 'zod';

const cell = z.string().max(400).default('');

/** One person by form: the same cells as a pasted row, checked by the same rules. */
export const enrolmentSchema = z.object({
	name: cell,
	email: cell,
	phone: cell,
	language: cell,
	zone: cell,
	availability: cell,
	code: cell
});
