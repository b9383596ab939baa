import { z } from 'zod';

/** What one column of a trial file is read as. */
export const columnUseSchema = z.discriminatedUnion('use', [
	z.object({ use: z.enum(['participant', 'visit', 'block', 'trial', 'date', 'ignore']) }),
	z.object({ use: z.literal('variable'), variable: z.string(), unit: z.string() })
]);

export const mappingSchema = z.object({
	columns: z.record(z.string(), columnUseSchema),
	delimiter: z.string().length(1),
	decimalSign: z.enum(['.', ','])
});

export type ColumnUse = z.infer<typeof columnUseSchema>;
export type Mapping = z.infer<typeof mappingSchema>;

/** A fault or a warning in a file, with the place to mend. Line 1 is the file's first line. */
export type FileProblem = {
	code: string;
	line: number | null;
	column: string | null;
	message: string;
};

const betrayingWords =
	/^(arm|arms|group|grp|condition|cond|treatment|allocation|allocated|randomi[sz]ed|assignment)([_\s-]?\d*|[_\s-].*)$/i;

/** Whether a column's name says which arm a person is in: such a column is never stored. */
export function betraysArm(columnName: string): boolean {
	return betrayingWords.test(columnName.trim());
}
