import { DESIGN_LIMITS, ROUNDING } from '../design-limits.ts';
import { nameVisit, type Design, type DesignBlock, type DesignVisit } from '../design.ts';
import type { Check, Finding } from '../finding.ts';
import type { DesignOperation } from '../repair.ts';
import { describeByArm, listArmVisits, listBlockLists, sum, writeNumber } from '../walk-design.ts';

/** Rest of one arm in a visit. */
interface Rest {
	/** Mean seconds after a trial; null: there is none. */
	readonly afterTrialSeconds: number | null;
	readonly betweenBlocksMinutes: number;
	readonly restBlocksMinutes: number;
}

const KINDS = [
	['afterTrialSeconds', 's after each trial'],
	['betweenBlocksMinutes', 'min between blocks'],
	['restBlocksMinutes', 'min of rest blocks']
] as const satisfies readonly (readonly [keyof Rest, string])[];

/** Arms that rest more than others in a visit. */
export const checkRest: Check = (design) =>
	design.visits.flatMap((visit, index): Finding[] => {
		const rows = listArmVisits(design, visit).map(({ arm, blocks }) => ({
			arm,
			rest: measureRest(blocks)
		}));
		const differing = KINDS.filter(([kind]) => isApart(rows.map(({ rest }) => rest[kind])));
		if (differing.length === 0) return [];
		const said = differing.map(([kind, unit]) => {
			const values = rows.map(({ arm, rest }) => ({ arm, value: writeNumber(rest[kind] ?? 0) }));
			return `${describeByArm(values)} ${unit}`;
		});
		return [
			{
				key: `unequal-rest:v${index + 1}`,
				code: 'unequal-rest',
				place: { visit: index + 1 },
				field: `visits.${index}.blocks`,
				numbers: {
					rest: Object.fromEntries(rows.map(({ arm, rest }) => [arm.key, { ...rest }])),
					limit: DESIGN_LIMITS.restApart
				},
				severity: 'serious',
				text: `${nameVisit(visit, index)}: ${said.join('; ')}. Rest is part of the dose.`,
				repair: {
					label: 'Give every arm the same rest',
					operations: equalise(design, visit, index)
				}
			}
		];
	});

function isApart(given: readonly (number | null)[]): boolean {
	const values = given.flatMap((value) => value ?? []);
	return Math.max(...values) - Math.min(...values) > DESIGN_LIMITS.restApart + ROUNDING;
}

function measureRest(blocks: readonly DesignBlock[]): Rest {
	const trials = sum(blocks.map((block) => block.trials ?? 0));
	const seconds = sum(
		blocks.map((block) => (block.trials ?? 0) * (block.restBetweenTrialsSeconds ?? 0))
	);
	return {
		afterTrialSeconds: trials > 0 ? seconds / trials : null,
		betweenBlocksMinutes: sum(blocks.slice(0, -1).map((block) => block.restAfterMinutes ?? 0)),
		restBlocksMinutes: sum(
			blocks.map((block) => (block.purpose === 'rest' ? (block.restMinutes ?? 0) : 0))
		)
	};
}

/** Everybody rests as the first arm does. Where a list has no place for its rests, nobody has them. */
function equalise(design: Design, visit: DesignVisit, index: number): DesignOperation[] {
	const lists = listBlockLists(design, visit);
	const [first] = lists;
	if (!first) return [];
	const model = first.blocks;
	const hasRoom = lists.every(({ blocks }) => withRestBlocks(blocks, model).length > 1);
	const rest = measureRest(model);
	return lists.map(({ list, blocks }) => {
		const rested = withRestBlocks(blocks, model);
		const spread = isSameShape(rested, model) && hasRoom ? model : null;
		return {
			...{ kind: 'set-blocks', visit: index, arm: list },
			blocks: rested.map((block, at) => ({
				...block,
				restBetweenTrialsSeconds: block.purpose === 'rest' ? null : rest.afterTrialSeconds || null,
				restAfterMinutes: spread
					? (spread[at]?.restAfterMinutes ?? null)
					: at === 0 && hasRoom
						? rest.betweenBlocksMinutes || null
						: null
			}))
		};
	});
}

function isSameShape(blocks: readonly DesignBlock[], model: readonly DesignBlock[]): boolean {
	return blocks.length === model.length;
}

/** A list with the rest blocks of another, at the same places as far as it reaches. */
function withRestBlocks(
	blocks: readonly DesignBlock[],
	model: readonly DesignBlock[]
): DesignBlock[] {
	const list = blocks.filter(({ purpose }) => purpose !== 'rest');
	model.forEach((block, at) => {
		if (block.purpose === 'rest') list.splice(at, 0, { ...block });
	});
	// Nothing but rest: there is nothing to keep.
	return list.length > 0 ? list : model.map((block) => ({ ...block }));
}
