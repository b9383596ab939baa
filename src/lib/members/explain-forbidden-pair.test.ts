import { expect, test } from 'vitest';
import { explainForbiddenPair } from './explain-forbidden-pair';

test('the reason names both roles and what to do', () => {
	expect(explainForbiddenPair('approver', 'coordinator')).toBe(
		'They are or were coordinator in this study. The approver sees arms; whoever recruits, runs or scores as coordinator must never have seen them. Give the role to somebody else.'
	);
});

test('it is the same whichever of the two came first', () => {
	expect(explainForbiddenPair('coordinator', 'approver')).toContain(
		'The approver sees arms; whoever recruits, runs or scores as coordinator'
	);
});

test.each([
	['unblinded-statistician', 'investigator', 'investigator is blinded'],
	['operator', 'investigator', 'lets the investigator see arms'],
	['approver', 'unblinded-statistician', 'unless the protocol declares a small team']
] as const)('%s beside %s says why', (wanted, held, part) => {
	expect(explainForbiddenPair(wanted, held)).toContain(part);
});
