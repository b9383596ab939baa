import { entry } from '../linear-algebra/vector.ts';
import { findFeedback, type Obligation, type ObligationMemory } from './obligation-settings.ts';
import type { BlockParameters } from './policy-memory.ts';
import type { LastBlock } from './policy-state.ts';
import type { Answer, Turn } from './turn.ts';

/** Codes by kind; `washout` and `retention` share theirs with the policy's own. */
const CODES: Readonly<Record<Obligation['kind'], string>> = {
	probe: 'PROBE-DECLARED',
	clamp: 'CLAMP-DUE',
	washout: 'WASHOUT-DUE',
	retention: 'RETENTION-DUE',
	transfer: 'TRANSFER-DUE'
};

/** Counts a finished block for the obligations that the protocol declares; nothing without any. */
export function countObligations(turn: Turn, last: LastBlock): void {
	const { settings, memory } = turn;
	const { obligations } = settings;
	if (!obligations) return;
	const known = openDay(turn, memory.obligations?.day ?? turn.state.day);
	const place = findPlaceThatRan(turn, last);
	const isPerturbed = last.kind === 'region' || last.kind === 'shift';
	const isNeutral = last.kind === 'rest' || last.kind === 'retention';
	memory.obligations = {
		day: known.day,
		isStartOpen: known.isStartOpen && (place !== null || isNeutral),
		run: place === null ? known.run : [...known.run, place],
		perturbed: obligations.map((_, i) =>
			i === place ? 0 : entry(known.perturbed, i) + (isPerturbed ? 1 : 0)
		)
	};
}

/** Which obligation the block fulfilled: the planned one, or the first open one of its kind. */
function findPlaceThatRan({ settings, memory }: Turn, last: LastBlock): number | null {
	const planned = memory.planned;
	if (planned?.kind === last.kind && planned.parameters.obligation !== undefined)
		return planned.parameters.obligation;
	const run = memory.obligations?.run ?? [];
	const place = (settings.obligations ?? []).findIndex(
		({ kind }, i) => kind === last.kind && !run.includes(i)
	);
	return place < 0 ? null : place;
}

/** Puts the obligations after a perturbation among the blocks that are due. */
export function addObligationsAfter({ settings, memory }: Turn, ended: 'region' | 'shift'): void {
	(settings.obligations ?? []).forEach(({ kind, when }, obligation) => {
		if (when.at !== 'after' || when.ended !== ended) return;
		const due = { kind, why: CODES[kind], obligation };
		// What is left of a shift is measured before the washout takes it away.
		const isMeasure = ended === 'shift' && (kind === 'clamp' || kind === 'transfer');
		if (isMeasure) memory.due.unshift(due);
		else memory.due.push(due);
	});
}

/** The first obligation of the day's start, of its end or of a count of perturbed blocks. */
export function askDeclared(turn: Turn, at: 'day-start' | 'day-end' | 'every'): Answer | null {
	const { settings, state, memory } = turn;
	const { obligations } = settings;
	if (!obligations) return null;
	memory.obligations = openDay(turn, state.day);
	const known = memory.obligations;
	const open = obligations.flatMap((obligation, i) =>
		obligation.when.at === at && isDue(turn, known, i) ? [i] : []
	);
	const [first] = open;
	const isRoomLeft = (state.blocksLeftToday ?? Number.POSITIVE_INFINITY) > open.length;
	if (first === undefined || (at === 'day-end' && isRoomLeft)) return null;
	return answerObligation(turn, first);
}

function isDue({ settings, state }: Turn, known: ObligationMemory, place: number): boolean {
	const when = settings.obligations?.[place]?.when;
	if (!when || when.at === 'after') return false;
	if (when.at === 'every') return entry(known.perturbed, place) >= when.perturbedBlocks;
	if (known.run.includes(place)) return false;
	if (when.days && !when.days.includes(state.day)) return false;
	if (when.at === 'day-end') return true;
	const gap = state.gapHours ?? (state.blockInDay > 0 ? Number.POSITIVE_INFINITY : 0);
	return known.isStartOpen && gap >= when.gapHoursMin;
}

/** The obliged block at a place in the protocol's list. */
export function answerObligation(turn: Turn, place: number): Answer {
	const obligation = turn.settings.obligations?.[place];
	if (!obligation) throw new RangeError(`the protocol has no obligation ${place + 1}`);
	const { kind, trials, targetOffset, when } = obligation;
	const feedback = findFeedback(obligation);
	const sd = feedback === 'clamped-to-noise' ? findResultSd(turn) : undefined;
	const parameters: BlockParameters = {
		...{ obligation: place, feedback },
		...(trials === undefined ? {} : { trials }),
		...(targetOffset === undefined ? {} : { targetOffset }),
		...(sd === undefined ? {} : { clampSd: sd })
	};
	return { code: CODES[kind], kind, parameters, values: { at: when.at } };
}

/** SD of the person's own result in the last clean plain blocks; undefined before any. */
function findResultSd({ memory }: Turn): number | undefined {
	const { results } = memory;
	const total = results.reduce((sum, { n }) => sum + n, 0);
	if (total === 0) return undefined;
	return Math.sqrt(results.reduce((sum, { n, fSd }) => sum + n * fSd ** 2, 0) / total);
}

/** What is known of a day; a new day starts with nothing run. */
function openDay({ memory, settings }: Turn, day: number): ObligationMemory {
	const known = memory.obligations;
	const perturbed = (settings.obligations ?? []).map((_, i) => known?.perturbed[i] ?? 0);
	if (known?.day === day) return { ...known, perturbed };
	return { day, isStartOpen: true, run: [], perturbed };
}
