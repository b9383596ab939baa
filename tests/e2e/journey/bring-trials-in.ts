import { describe, it } from 'vitest';
import { moveClock } from '../pages/demo-clock';
import { addColumn, makeTrialFile } from '../pages/puck-trials';
import { readTrials, storeTrials } from '../pages/visit-pages';
import { desks, journey, others, steady, tuesdayEvening } from './world';

export function bringTrialsIn() {
	describe('step 5: the operator brings trials in', () => {
		const file = makeTrialFile('baseline.csv', { day: 1, people: steady });

		it('a visit that has not begun is refused', async () => {
			await desks.operator.open(`${journey.study}/visits`);
			const early = makeTrialFile('early.csv', { day: 2, people: [{ code: 'Q11', like: 'Q11' }] });
			await readTrials(desks.operator, early);
			await desks.operator.see(/visit 2 of Q11 is on .*: it has not begun/);
			await desks.operator.keep('50-not-begun');
		});

		it('once all have been there, the wrong person is refused by code, line and column', async () => {
			await moveClock(desks.operator, tuesdayEvening);
			await desks.operator.open(`${journey.study}/visits`);
			const wrong = makeTrialFile('wrong.csv', { day: 1, people: [{ code: 'Q00', like: 'Q11' }] });
			await readTrials(desks.operator, wrong);
			await desks.operator.see(/Line 2, column participant: no participant with the code “Q00”/);
			await desks.operator.keep('51-wrong-person');
		});

		it('a column named group is offered as ignore only; the file is stored once', async () => {
			const withGroup = addColumn(file, 'group', 'a');
			await readTrials(desks.operator, withGroup);
			await desks.operator.see('ignored: it may name the arm');
			await desks.operator.keep('52-mapping');
			await storeTrials(desks.operator, file.count);
			await desks.operator.see(`Stored ${file.count} trials in ${steady.length} blocks`);
			await readTrials(desks.operator, withGroup);
			await desks.operator.see('This very file is stored already');
			await desks.operator.keep('53-same-file');
		});

		it('the rest follows in a second file', async () => {
			const rest = makeTrialFile('baseline-rest.csv', { day: 1, people: others });
			await readTrials(desks.operator, rest);
			await storeTrials(desks.operator, rest.count);
			await desks.operator.see(`Stored ${rest.count} trials in ${others.length} blocks`);
		});
	});
}
