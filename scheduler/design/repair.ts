import type { JsonValue } from '../policies/json-value.ts';
import type { Design, DesignArm, DesignBlock, DesignVisit } from './design.ts';

/** One change of a design, as plain data. Places count from 0, as lists do. */
export type DesignOperation =
	| { readonly kind: 'set-value'; readonly path: DesignPath; readonly value: JsonValue }
	/** The blocks of one arm in a visit, or (null) of every arm without a list of its own. */
	| {
			readonly kind: 'set-blocks';
			readonly visit: number;
			readonly arm: string | null;
			readonly blocks: readonly DesignBlock[];
	  }
	| { readonly kind: 'insert-visit'; readonly at: number; readonly visit: DesignVisit }
	| { readonly kind: 'add-arm'; readonly arm: DesignArm };

export type DesignPath = readonly (string | number)[];

/** A change that takes one finding away; what it says is what its button says. */
export interface Repair {
	readonly label: string;
	readonly operations: readonly DesignOperation[];
}

/** The design after a repair; the one that is given stays as it is. */
export function repairDesign(design: Design, { operations }: Repair): Design {
	return operations.reduce(applyOperation, design);
}

function applyOperation(design: Design, operation: DesignOperation): Design {
	switch (operation.kind) {
		case 'set-value':
			return setAt(design, operation.path, operation.value) as Design;
		case 'set-blocks':
			return {
				...design,
				visits: design.visits.map((visit, index) =>
					index === operation.visit ? withBlocks(visit, operation.arm, operation.blocks) : visit
				)
			};
		case 'insert-visit':
			return { ...design, visits: design.visits.toSpliced(operation.at, 0, operation.visit) };
		case 'add-arm':
			return { ...design, arms: [...design.arms, operation.arm] };
	}
}

function withBlocks(
	visit: DesignVisit,
	arm: string | null,
	blocks: readonly DesignBlock[]
): DesignVisit {
	if (arm === null) return { ...visit, blocks: [...blocks] };
	return { ...visit, armBlocks: { ...visit.armBlocks, [arm]: [...blocks] } };
}

/** Plain data with one value replaced; what is missing on the way is made. */
export function setAt(data: unknown, path: DesignPath, value: unknown): unknown {
	const [first, ...rest] = path;
	if (first === undefined) return value;
	if (Array.isArray(data)) {
		return data.map((item: unknown, index) => (index === first ? setAt(item, rest, value) : item));
	}
	const fields = (data ?? {}) as Record<string, unknown>;
	return { ...fields, [first]: setAt(fields[first], rest, value) };
}
