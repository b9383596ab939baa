import { nameVisit, type DesignBlock } from '../design.ts';
import type { Check, Finding } from '../finding.ts';
import type { DesignOperation } from '../repair.ts';
import { blockPath, describeByArm, listArmVisits, listBlockLists } from '../walk-design.ts';

/** Arms that are told different things at the same place of a visit. */
export const checkInstructions: Check = (design) =>
	design.visits.flatMap((visit, index) => {
		const rows = listArmVisits(design, visit).map(({ arm, blocks }) => ({
			arm,
			places: listTold(blocks)
		}));
		const length = Math.min(...rows.map(({ places }) => places.length));
		return Array.from({ length: Number.isFinite(length) ? length : 0 }, (_, at): Finding[] => {
			const told = rows.map(({ arm, places }) => ({
				arm,
				version: places[at]?.block.instruction ?? ''
			}));
			if (new Set(told.map(({ version }) => version)).size < 2) return [];
			const wanted = told.find(({ version }) => version !== '')?.version ?? '';
			const said = describeByArm(
				told.map(({ arm, version }) => ({ arm, value: version === '' ? 'none' : version }))
			);
			return [
				{
					key: `instruction-differs:v${index + 1}:b${at + 1}`,
					code: 'instruction-differs',
					place: { visit: index + 1, block: at + 1 },
					field: `visits.${index}.blocks.${rows[0]?.places[at]?.index ?? at}.instruction`,
					numbers: {
						versions: Object.fromEntries(told.map(({ arm, version }) => [arm.key, version]))
					},
					severity: 'serious',
					text: `${nameVisit(visit, index)}, block ${at + 1}: version of the instruction: ${said}. What people are told is a treatment of its own.`,
					repair: {
						label: `Read version ${wanted} to every arm`,
						operations: listBlockLists(design, visit).map(({ list, blocks }): DesignOperation => {
							const place = listTold(blocks)[at]?.index ?? at;
							return {
								kind: 'set-value',
								path: [...blockPath(index, list, place), 'instruction'],
								value: wanted
							};
						})
					}
				}
			];
		}).flat();
	});

/** Blocks in which something is done; a rest has no place of its own among them. */
function listTold(blocks: readonly DesignBlock[]): { block: DesignBlock; index: number }[] {
	return blocks
		.map((block, index) => ({ block, index }))
		.filter(({ block }) => block.purpose !== 'rest');
}
