import { DESIGN_LIMITS } from '../design-limits.ts';
import type { Design, DesignArm, DesignBlock } from '../design.ts';
import type { Check } from '../finding.ts';
import type { DesignOperation, Repair } from '../repair.ts';
import { joinWords, nameArm } from '../walk-design.ts';

type Kind = 'region' | 'shift';
interface Place {
	readonly visit: number;
	readonly at: number;
	readonly block: DesignBlock;
}

const NAMES: Readonly<Record<Kind, string>> = { region: 'regions', shift: 'target shifts' };
const ARMS_MAX = 6;

/** Two kinds of manipulation that come in the same order for nearly everybody in the fixed arms. */
export const checkOrder: Check = (design) => {
	const arms = design.arms
		.filter(({ rule }) => rule === 'fixed')
		.map((arm) => ({ arm, places: listManipulated(design, arm) }))
		.filter(({ places }) => new Set(places.map(kindOf)).size > 1);
	const pairs = arms.flatMap(({ places }) => listPairs(places));
	if (pairs.length === 0) return [];
	const share = pairs.filter((first) => first === 'region').length / pairs.length;
	const most = Math.max(share, 1 - share);
	if (most <= DESIGN_LIMITS.sameOrderShare) return [];
	const [first, second] =
		share > 0.5 ? (['region', 'shift'] as const) : (['shift', 'region'] as const);
	const repair = mirror(design, arms);
	const start = arms[0]?.places[0];
	return [
		{
			key: 'order-fixed',
			code: 'order-fixed',
			place: { visit: (start?.visit ?? 0) + 1 },
			field: `visits.${start?.visit ?? 0}.blocks`,
			numbers: { share: most, limit: DESIGN_LIMITS.sameOrderShare, pairs: pairs.length, first },
			severity: 'serious',
			text: `${joinWords(arms.map(({ arm }) => nameArm(arm)))}: ${NAMES[first]} come before ${NAMES[second]} in ${Math.round(most * 100)} % of all pairs of blocks; up to ${DESIGN_LIMITS.sameOrderShare * 100} % is balanced. What is due to the order cannot be told from what is due to the kind.`,
			...(repair ? { repair } : {})
		}
	];
};

function listManipulated(design: Design, { key }: DesignArm): Place[] {
	return design.visits.flatMap(({ blocks, armBlocks }, visit) =>
		(armBlocks[key] ?? blocks).flatMap((block, at) =>
			block.purpose === 'region' || block.purpose === 'shift' ? [{ visit, at, block }] : []
		)
	);
}

function kindOf({ block }: Place): Kind {
	return block.purpose === 'region' ? 'region' : 'shift';
}

/** Which kind comes first, for each pair of a region and a shift block of one arm. */
function listPairs(places: readonly Place[]): Kind[] {
	return places.flatMap((place, i) =>
		places.slice(i + 1).flatMap((later) => (kindOf(place) === kindOf(later) ? [] : [kindOf(place)]))
	);
}

type ManipulatedArm = { readonly arm: DesignArm; readonly places: readonly Place[] };

/** Some arms run their manipulated blocks backwards; where that is not enough, the fullest gets such a twin. */
function mirror(design: Design, arms: readonly ManipulatedArm[]): Repair | null {
	const chosen = chooseTurned(arms);
	if (measureShare(arms, chosen) <= DESIGN_LIMITS.sameOrderShare) {
		return {
			label: `Let ${joinWords(chosen.map(({ arm }) => nameArm(arm)))} take the other order`,
			operations: chosen.flatMap((one) => reverseFor(design, one, one.arm.key))
		};
	}
	const [fullest] = arms.toSorted((a, b) => b.places.length - a.places.length);
	if (!fullest || design.arms.length >= ARMS_MAX) return null;
	const key = nameTwin(design, fullest.arm.key);
	const twin = { ...fullest.arm, key, name: `${nameArm(fullest.arm)}, other order`.slice(0, 60) };
	return {
		label: `Add an arm with the other order of ${nameArm(fullest.arm)}`,
		operations: [{ kind: 'add-arm', arm: twin }, ...reverseFor(design, fullest, key)]
	};
}

/** Arms whose turning brings the orders nearer to balance, the fullest first. */
function chooseTurned(arms: readonly ManipulatedArm[]): ManipulatedArm[] {
	const chosen: ManipulatedArm[] = [];
	for (const one of arms.toSorted((a, b) => b.places.length - a.places.length)) {
		if (measureShare(arms, [...chosen, one]) < measureShare(arms, chosen)) chosen.push(one);
	}
	return chosen;
}

/** Share of the commoner order when some arms are turned. */
function measureShare(arms: readonly ManipulatedArm[], turned: readonly ManipulatedArm[]): number {
	const pairs = arms.flatMap((one) =>
		listPairs(turned.includes(one) ? one.places.toReversed() : one.places)
	);
	const share = pairs.filter((first) => first === 'region').length / Math.max(1, pairs.length);
	return Math.max(share, 1 - share);
}

function nameTwin({ arms }: Design, key: string): string {
	const isTaken = (name: string) => arms.some((arm) => arm.key === name);
	const base = key.slice(0, 26);
	for (let number = 2; ; number++) if (!isTaken(`${base}-${number}`)) return `${base}-${number}`;
}

/** The blocks of an arm with its manipulated blocks in the opposite order, as the list of `key`. */
function reverseFor(
	design: Design,
	{ arm, places }: { arm: DesignArm; places: readonly Place[] },
	key: string
): DesignOperation[] {
	const turned = places.toReversed();
	return design.visits.flatMap(({ blocks, armBlocks }, visit): DesignOperation[] => {
		const own = armBlocks[arm.key];
		const list = (own ?? blocks).map((block, at) => {
			const index = places.findIndex((place) => place.visit === visit && place.at === at);
			return index < 0 ? block : (turned[index]?.block ?? block);
		});
		const isTouched = places.some((place) => place.visit === visit);
		return isTouched || (own && key !== arm.key)
			? [{ kind: 'set-blocks', visit, arm: key, blocks: list }]
			: [];
	});
}
