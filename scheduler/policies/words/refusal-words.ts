import type { PlacementRung, ShareRefusal } from '../../perturbations/weigh-share.ts';
import type { PlacementSettings } from '../../perturbations/region-settings.ts';
import { formatDecimal, formatPercent } from './read-values.ts';

/** Why an aim cannot be worked on now. */
export const AIM_REFUSAL_WORDS: Readonly<Record<string, string>> = {
	MET: 'This aim is met.',
	CLOSED: 'Penalized regions failed too often for this person; the aim is closed.',
	FROZEN: 'The target shift was not followed; the aim is closed.',
	'NO-EXIT': 'At no share does a region leave a way out within reach.',
	ACROSS: 'The cloud lies across the solutions, so a region along them would not move it.',
	'DAY-TOO-SHORT': 'Too few trials are left today for one step of the target to be followed.',
	'TOO-FEW-PLAIN': 'Too few plain trials are known to say how much the result spreads.',
	'NO-SPREAD': 'Every plain trial had the same result; there is no spread to measure steps in.',
	'MORE-FREE-DIRECTIONS':
		'The solutions of this task run in three or more directions; a region can be placed for one or two.',
	'TWO-RESULTS':
		'This task has more than one result, so there is no one line along which its target could be shifted.',
	'NO-FREE-DIRECTION':
		'This task has as many results as variables: there is no other solution to move to.',
	'SINGULAR-PLACE':
		'Near the person’s own trials the results depend on each other, as in a stretched arm: there is no clear way along the solutions.',
	'NO-SOLUTION-NEAR': 'No solution of the task is found near the person’s own trials.',
	'SINGULAR-CLOUD': 'The person’s cloud is flat in one direction.'
};

const SHARE_REFUSAL: Record<
	ShareRefusal,
	(rung: PlacementRung, settings: PlacementSettings) => string
> = {
	'too-little-leaks': ({ staySuccess }, { leakMin }) =>
		`only ${formatPercent(staySuccess)} of the trials would still succeed without moving, ${formatPercent(leakMin)} are needed to find the way`,
	'covers-solutions': ({ cover }, { coverMax }) =>
		`it covers ${formatPercent(cover ?? 1)} of the solutions within reach, ${formatPercent(coverMax ?? 1)} are allowed`,
	'no-exit': () => 'nowhere within reach do enough trials succeed outside it',
	'exit-too-near': (_rung, { reachMinSd }) =>
		`the way out is nearer than ${formatDecimal(reachMinSd, 1)} own SD`,
	'exit-too-far': (_rung, { reachMaxSd }) =>
		`the way out is farther than ${formatDecimal(reachMaxSd, 1)} own SD`,
	'catches-too-little': () => 'moved this far it no longer catches enough of the person’s trials'
};

/** One sentence about one share weighed. */
export function describeShare(rung: PlacementRung, settings: PlacementSettings): string {
	const lean =
		rung.lean === 0 ? '' : `, moved by ${formatDecimal(rung.lean, 2)} own SD along the solutions,`;
	const size = `A region for ${formatPercent(rung.share)} of the trials${lean}`;
	if (rung.refusal === null)
		return `${size} is accepted: ${formatPercent(rung.staySuccess)} of the trials would still succeed without moving.`;
	return `${size} is refused: ${SHARE_REFUSAL[rung.refusal](rung, settings)}.`;
}
