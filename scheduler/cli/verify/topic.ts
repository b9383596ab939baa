import { z } from 'zod';

/** A table of a case file. */
export const datasetSchema = z.looseObject({
	columns: z.array(z.string()),
	rows: z.array(z.array(z.union([z.number(), z.string(), z.boolean(), z.null()])))
});

export type Inputs = Readonly<Record<string, unknown>>;
export type Datasets = Readonly<Record<string, z.output<typeof datasetSchema>>>;
export type Answers = Readonly<Record<string, unknown>>;

/**
 * Computes what a case of one topic expects, under the names the case uses; it may give more.
 * undefined: these inputs are none that it knows by their names.
 *
 * @throws {RangeError | ZodError} inputs of the right names whose values cannot be computed with
 */
export interface Topic {
	(inputs: Inputs, datasets: Datasets): Answers | undefined;
	/** Names of the inputs of each kind of case, those that may be missing in brackets. */
	readonly forms?: readonly string[];
}

/** Topics of one part of the engine by the names that cases use. */
export type TopicGroup = Readonly<Record<string, Topic>>;

/** Stands for a value that tells how a case was checked elsewhere, such as a Monte Carlo estimate. */
export const HOW_CHECKED = Symbol('how the case was checked');

/** An answer with a tolerance of its own, or whose sign is free. */
export class Judged {
	readonly value: unknown;
	readonly tolerance: {
		readonly abs?: number | undefined;
		readonly rel?: number | undefined;
	} | null;
	readonly isSignFree: boolean;

	constructor(
		value: unknown,
		{ tolerance = null, isSignFree = false }: Partial<Pick<Judged, 'tolerance' | 'isSignFree'>>
	) {
		this.value = value;
		this.tolerance = tolerance;
		this.isSignFree = isSignFree;
	}
}

/** Several answers to inputs whose names leave open what they mean; one of them must be as expected. */
export class OneOf {
	readonly values: readonly unknown[];

	constructor(...values: readonly unknown[]) {
		this.values = values;
	}
}

/** A topic for inputs of exactly these names; those with a default or optional may be missing. */
export function forInputs<S extends z.ZodObject>(
	schema: S,
	compute: (inputs: z.output<S>, datasets: Datasets) => Answers | undefined
): Topic {
	const names = Object.keys(schema.shape);
	const needed = names.filter((name) => !schema.shape[name]?.safeParse(undefined).success);
	const topic: Topic = (inputs, datasets) => {
		const given = Object.keys(inputs);
		const fits =
			needed.every((name) => given.includes(name)) && given.every((name) => names.includes(name));
		return fits ? compute(schema.parse(inputs), datasets) : undefined;
	};
	const form = names.map((name) => (needed.includes(name) ? name : `[${name}]`)).join(', ');
	return Object.assign(topic, { forms: [form] });
}

/** The first of several topics that knows the inputs. */
export function firstOf(...topics: readonly Topic[]): Topic {
	const first: Topic = (inputs, datasets) => {
		for (const topic of topics) {
			const answers = topic(inputs, datasets);
			if (answers) return answers;
		}
		return undefined;
	};
	return Object.assign(first, { forms: topics.flatMap(({ forms = [] }) => forms) });
}

/**
 * Rows of a dataset as numbers, all columns or those named.
 * @throws {RangeError} no such dataset or column, or a cell that is no number
 */
export function readNumbers(
	datasets: Datasets,
	name: string,
	columns?: readonly string[]
): number[][] {
	const data = datasets[name];
	if (!data) throw new RangeError(`there is no dataset “${name}”`);
	const places = (columns ?? data.columns).map((column) => {
		const place = data.columns.indexOf(column);
		if (place < 0) throw new RangeError(`dataset “${name}” has no column “${column}”`);
		return place;
	});
	return data.rows.map((row, i) =>
		places.map((place) => {
			const cell = row[place];
			if (typeof cell === 'number') return cell;
			throw new RangeError(`dataset “${name}”, row ${i + 1}: ${String(cell)} is no number`);
		})
	);
}

/** One number or a list of them; a case may write a list of one as a number. */
export const listSchema = z.union([z.number().transform((value) => [value]), z.array(z.number())]);

/** A list, or the one value repeated so often. */
export function repeat(values: readonly number[], count: number): number[] {
	return Array.from({ length: count }, (_, i) => values[values.length === 1 ? 0 : i] ?? Number.NaN);
}
