import { ROUNDING } from '../design-limits.ts';
import { readPolicy, isPolicyAtWork } from '../design-policy.ts';
import { nameVisit, type Design, type DesignBlock } from '../design.ts';
import type { Check, Finding } from '../finding.ts';
import { joinWords, listBlockLists, listField, nameArm } from '../walk-design.ts';

/** Retention tests in which people are shown results, or something is changed for them. */
export const checkRetentionClean: Check = (design, _context) => [
	...design.visits.flatMap((visit, index) =>
		listBlockLists(design, visit).flatMap(({ list, arms, blocks }) =>
			blocks.flatMap((block, at): Finding[] => {
				const wrong = block.purpose === 'retention' ? listWrongs(block) : [];
				if (wrong.length === 0) return [];
				const who = list === null ? '' : ` (${joinWords(arms.map(nameArm))})`;
				return [
					{
						key: `retention-disturbed:v${index + 1}:b${at + 1}${list === null ? '' : `:${list}`}`,
						code: 'retention-disturbed',
						place: { visit: index + 1, block: at + 1, ...(list === null ? {} : { arm: list }) },
						field: `${listField(index, list)}.${at}`,
						numbers: {
							feedback: block.feedback,
							hasRegion: block.region !== null,
							shift: block.shift ? { from: block.shift.from, to: block.shift.to } : null,
							targetOffset: block.targetOffset
						},
						severity: 'serious',
						text: `${nameVisit(visit, index)}, block ${at + 1}${who}: the retention test has ${joinWords(wrong)}. What is kept shows only without help and without a change.`,
						repair: {
							label: 'Test without feedback and without a change',
							operations: [
								{
									...{ kind: 'set-blocks', visit: index, arm: list },
									blocks: blocks.map((other, i) => (i === at ? clean(other) : other))
								}
							]
						}
					}
				];
			})
		)
	),
	...checkObligations(design)
];

function listWrongs({ feedback, region, shift, targetOffset }: DesignBlock): string[] {
	const isMoved = [shift?.from, shift?.to].some((level) => Math.abs(level ?? 0) > ROUNDING);
	return [
		...(feedback === 'shown' ? ['the result shown after each trial'] : []),
		...(feedback?.startsWith('clamped') ? ['an error that is shown falsely'] : []),
		...(region ? ['a penalized region'] : []),
		...(isMoved ? [`a target moved from ${shift?.from ?? 0} to ${shift?.to ?? 0}`] : []),
		...(Math.abs(targetOffset ?? 0) > ROUNDING ? [`a target moved by ${targetOffset ?? 0}`] : [])
	];
}

function clean(block: DesignBlock): DesignBlock {
	return { ...block, feedback: 'hidden', region: null, shift: null, targetOffset: null };
}

/** Retention that the policy is obliged to give. */
function checkObligations(design: Design): Finding[] {
	const obligations = isPolicyAtWork(design) ? (readPolicy(design)?.obligations ?? []) : [];
	return obligations.flatMap(({ kind, feedback }, at): Finding[] => {
		if (kind !== 'retention' || feedback === undefined || feedback === 'hidden') return [];
		return [
			{
				key: `retention-disturbed:policy:${at + 1}`,
				code: 'retention-disturbed',
				place: {},
				field: `policy.obligations.${at}.feedback`,
				numbers: { feedback },
				severity: 'serious',
				text: `The retention that adaptive time must hold has feedback (${feedback}). What is kept shows only without help.`,
				repair: {
					label: 'Test without feedback',
					operations: [
						{
							...{ kind: 'set-value', path: ['policy', 'obligations', at, 'feedback'] },
							value: 'hidden'
						}
					]
				}
			}
		];
	});
}
