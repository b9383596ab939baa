import type { PlacedRegion } from '../../perturbations/region-settings.ts';
import type { ShiftRule } from '../../perturbations/shift-rule.ts';
import type { CloudGeometry } from '../decision.ts';
import type { AimName, PolicyMemory } from '../policy-memory.ts';
import type { PolicySettings } from '../policy-settings.ts';

/** What can be worked on now, and why the rest cannot. */
export interface Openings {
	region?: PlacedRegion;
	shift?: ShiftRule;
	refused: Partial<Record<AimName, string>>;
}

export interface AimPick {
	readonly aim: AimName;
	readonly code: string;
}

interface PickRequest {
	readonly openings: Openings;
	readonly geometry: CloudGeometry;
	readonly lack: Partial<Record<AimName, number>>;
	readonly memory: PolicyMemory;
	readonly settings: PolicySettings;
}

/** Up to this angle the cloud counts as lying along the solutions. */
const ALONG_MAX_DEG = 45;

/** Why a region is closed for reasons of the task or the cloud, not of the person's history. */
const HISTORY = new Set(['MET', 'CLOSED', 'ACROSS']);

/**
 * Which of the open aims comes next.
 *
 * Source:  method sheet D0 (Challenge).
 */
export function pickAim(request: PickRequest): AimPick | null {
	const { region, shift, refused } = request.openings;
	if (region && shift) return pickOfTwo(request);
	if (region) return { aim: 'region', code: 'ONLY-AIM' };
	if (!shift) return null;
	if (refused.region === 'ACROSS') return { aim: 'shift', code: 'REGION-ACROSS' };
	const isImpossible = refused.region !== undefined && !HISTORY.has(refused.region);
	return { aim: 'shift', code: isImpossible ? 'REGION-IMPOSSIBLE' : 'ONLY-AIM' };
}

function pickOfTwo({ geometry, lack, memory, settings }: PickRequest): AimPick {
	if (memory.avoid) return { aim: otherAim(memory.avoid), code: 'SWITCH-AIM' };
	const { region: lackRegion = 0, shift: lackShift = 0 } = lack;
	const margin = settings.hysteresis * settings.blockTrials;
	const stay = memory.lastChallenge;
	if (stay !== null) {
		const leads = stay === 'region' ? lackShift - lackRegion : lackRegion - lackShift;
		return leads > margin
			? { aim: otherAim(stay), code: 'AIM-BEHIND' }
			: { aim: stay, code: 'STAY-WITH-AIM' };
	}
	if (Math.abs(lackRegion - lackShift) > margin)
		return { aim: lackRegion > lackShift ? 'region' : 'shift', code: 'AIM-BEHIND' };
	return { aim: liesAlong(geometry, settings) ? 'region' : 'shift', code: 'ELLIPSOID' };
}

function liesAlong(
	{ eigenvalueRatio, alignmentDeg }: CloudGeometry,
	{ ratioMin }: PolicySettings
): boolean {
	return eigenvalueRatio >= ratioMin && alignmentDeg !== null && alignmentDeg <= ALONG_MAX_DEG;
}

function otherAim(aim: AimName): AimName {
	return aim === 'region' ? 'shift' : 'region';
}
