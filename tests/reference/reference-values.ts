import { readFileSync } from 'node:fs';
import { z } from 'zod';

/** Numbered cases of the method sheet; sources and tolerances in data/reference-values.json. */
const caseSchema = z.object({
	id: z.string(),
	inputs: z.record(z.string(), z.unknown()),
	expected: z.record(z.string(), z.unknown()),
	tolerance: z.object({ abs: z.number().optional(), rel: z.number().optional() })
});
const fileSchema = z.object({
	datasets: z.record(
		z.string(),
		z.object({ columns: z.array(z.string()), rows: z.array(z.array(z.number())) })
	),
	cases: z.array(caseSchema)
});
const file = fileSchema.parse(
	JSON.parse(readFileSync(new URL('data/reference-values.json', import.meta.url), 'utf8'))
);

export type ReferenceCase = z.output<typeof caseSchema>;

export function findCase(id: string): ReferenceCase {
	const found = file.cases.find((candidate) => candidate.id === id);
	if (!found) throw new RangeError(`no case ${id}`);
	return found;
}

/** Rows of a dataset, all columns or those named. */
export function readDataset(name: string, columns?: readonly string[]): number[][] {
	const data = file.datasets[name];
	if (!data) throw new RangeError(`no dataset ${name}`);
	const places = (columns ?? data.columns).map((column) => data.columns.indexOf(column));
	return data.rows.map((row) => places.map((place) => row[place] ?? Number.NaN));
}

export const numbers = z.array(z.number());
export const matrix = z.array(numbers);
