import { roleInSentence, type RoleName } from './role-names';

const seesArms: readonly RoleName[] = ['approver', 'unblinded-statistician'];
const runsOrScores: readonly RoleName[] = ['coordinator', 'operator', 'statistician'];

/**
 * Why two roles must not meet in one person and study, in plain words.
 *
 * @example explainForbiddenPair('approver', 'coordinator')
 */
export function explainForbiddenPair(wanted: RoleName, held: RoleName): string {
	const who = `They are or were ${roleInSentence(held)} in this study.`;
	return `${who} ${reason([wanted, held])} Give the role to somebody else.`;
}

function reason(pair: readonly RoleName[]): string {
	const unblinded = pair.find((role) => seesArms.includes(role));
	const blinded = pair.find((role) => runsOrScores.includes(role));
	if (unblinded && blinded) {
		return `The ${roleInSentence(unblinded)} sees arms; whoever recruits, runs or scores as ${roleInSentence(blinded)} must never have seen them.`;
	}
	if (pair.includes('investigator') && unblinded) {
		return `The ${roleInSentence(unblinded)} sees arms, and this study’s investigator is blinded.`;
	}
	if (pair.includes('investigator') && blinded) {
		return `This study’s protocol lets the investigator see arms, so the ${roleInSentence(blinded)} must be another person.`;
	}
	return 'Who settles decisions and who holds the allocation are two people, unless the protocol declares a small team.';
}
