import { z } from 'zod';
import { patternNames } from './patterns';

const title = (what: string) =>
	z
		.string()
		.trim()
		.min(3, `Write the ${what}, at least 3 characters`)
		.max(120, 'At most 120 characters');

/** What a new study needs to be told. */
export const newStudySchema = z.object({
	workingTitle: title('working title').default(''),
	publicTitle: title('public title').default(''),
	codePrefix: z
		.string()
		.trim()
		.regex(/^[A-Za-z]{1,4}$/, 'One to four letters, such as TW')
		.default(''),
	phone: z.string().trim().min(3, 'Whom may participants call?').max(40).default(''),
	pattern: z.enum(patternNames).default('two-arms')
});

export type NewStudy = z.infer<typeof newStudySchema>;
