import { placeLeaningRegion, placeRegion } from '../../perturbations/place-region.ts';
import { preparePlacement, type Cloud } from '../../perturbations/prepare-placement.ts';
import { computeCloudGeometry } from '../cloud-geometry.ts';
import type { CloudGeometry } from '../decision.ts';
import type { AimName } from '../policy-memory.ts';
import { createShiftParameters, prepareShift } from '../prepare-shift.ts';
import type { Answer, Turn } from '../turn.ts';
import { isAimMet } from './goals.ts';
import { pickAim, type Openings } from './pick-aim.ts';

/** A new region or a new shift. */
export function askChallenge(turn: Turn): Answer | null {
	const { memory, settings, facts, task } = turn;
	const cloud = chooseCloud(turn);
	const geometry = computeCloudGeometry(task, cloud);
	facts.geometry = geometry;
	const openings: Openings = { refused: {} };
	openShift(turn, openings);
	openRegion(turn, openings, { cloud, geometry });
	const lack = computeLack(turn);
	facts.aims = { lack, refused: openings.refused };
	const pick = pickAim({ openings, geometry, lack, memory, settings });
	if (!pick) return null;
	const values = { ...geometry, lackRegion: lack.region, lackShift: lack.shift };
	if (pick.aim === 'region' && openings.region)
		return { code: pick.code, kind: 'region', parameters: { region: openings.region }, values };
	if (pick.aim === 'shift' && openings.shift)
		return {
			...{ code: pick.code, kind: 'shift', values },
			parameters: createShiftParameters(openings.shift)
		};
	return null;
}

/** A region that leans, where a centered one leaves no way out and no shift is open. */
export function askLean(turn: Turn): Answer | null {
	const { settings, facts } = turn;
	if (facts.aims?.refused.region !== 'NO-EXIT') return null;
	if (!turn.ground) return null;
	const choice = placeLeaningRegion(turn.ground, {
		...{ shares: listShares(turn), leans: settings.lean, catchMin: settings.leanCatch }
	});
	facts.lean = [...choice.rungs];
	if (!choice.ok) return null;
	const { region } = choice;
	const values = { lean: region.lean, catch: region.catch };
	return { code: 'LEAN', kind: 'region', parameters: { region }, values };
}

/** The reference, or the last plain block where that one is under suspicion. */
function chooseCloud({ memory }: Turn): Cloud {
	const { cloud, ref } = memory;
	if (!cloud) throw new RangeError('a challenge needs a cloud');
	const isReferenceGood = memory.lastGates.length === 0 && memory.suspect === 0;
	const best = ref && isReferenceGood && ref.n >= cloud.n ? ref : cloud;
	return { n: best.n, mean: best.mean, cov: best.cov };
}

function openShift(turn: Turn, openings: Openings): void {
	const { aims } = turn.settings;
	if (!aims.shift) return;
	const prepared = isAimMet(turn, 'shift')
		? ({ ok: false, reason: 'MET' } as const)
		: prepareShift(turn, aims.shift.goal);
	if (prepared.ok) openings.shift = prepared.rule;
	else openings.refused.shift = prepared.reason;
}

function openRegion(
	turn: Turn,
	openings: Openings,
	{ cloud, geometry }: { cloud: Cloud; geometry: CloudGeometry }
): void {
	const { settings, memory, facts } = turn;
	if (!settings.aims.region) return;
	const refuse = (code: string) => (openings.refused.region = code);
	if (isAimMet(turn, 'region')) return void refuse('MET');
	if (memory.done.failed >= settings.region.maxFailed) return void refuse('CLOSED');
	const prepared = preparePlacement({ task: turn.task, cloud, settings: settings.place });
	if (!prepared.ok) return void refuse(prepared.reason.toUpperCase());
	turn.ground = prepared.ground;
	const choice = placeRegion(prepared.ground, listShares(turn));
	facts.place = [...choice.rungs];
	if (!choice.ok) refuse('NO-EXIT');
	else if (isAcross(turn, geometry) && openings.shift) refuse('ACROSS');
	else openings.region = choice.region;
}

/** Shares that the step limit still allows. */
function listShares({ memory, settings }: Turn): number[] {
	const { shares } = settings.place;
	const cap = memory.shareCap ?? shares[0] ?? 1;
	return shares.filter((share) => share <= cap + 1e-12);
}

/** The cloud lies across the solutions and is clearly longer than wide. */
function isAcross({ settings }: Turn, { eigenvalueRatio, alignmentDeg }: CloudGeometry): boolean {
	return (
		eigenvalueRatio >= settings.ratioAcross &&
		alignmentDeg !== null &&
		alignmentDeg > settings.alignMaxDeg
	);
}

/** Trials by which each aim lacks its share of the perturbed trials, the next block included. */
function computeLack({ settings, memory }: Turn): Partial<Record<AimName, number>> {
	const { aims, blockTrials } = settings;
	const total = memory.done.region + memory.done.shift + blockTrials;
	const weight = (aims.region?.share ?? 0) + (aims.shift?.share ?? 0);
	const lackOf = (aim: AimName) => {
		const share = aims[aim]?.share;
		return share === undefined ? {} : { [aim]: (share / weight) * total - memory.done[aim] };
	};
	return { ...lackOf('region'), ...lackOf('shift') };
}
