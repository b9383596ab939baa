import { describe, expect, it } from 'vitest';
import { addPerson, chooseEverybody, openPerson, pasteRows } from '../pages/people-pages';
import { addressOf, cancelled, desks, everybody, journey, newcomer, unsure } from './world';

export function enrolAndBook() {
	describe('step 2: the coordinator enrols and books', () => {
		it('adds one person by the form', async () => {
			await desks.coordinator.open(`${journey.study}/people`);
			await addPerson(desks.coordinator, newcomer('Q11'));
			await desks.coordinator.keep('20-added');
		});

		it('pastes the others; a fault is named by line and column, and mended in place', async () => {
			const rows = [
				...everybody.slice(1).map(({ code }) => newcomer(code)),
				newcomer(cancelled),
				newcomer(unsure)
			];
			const [first, ...rest] = rows;
			const faulty = { ...first, email: 'q23.people.example' } as (typeof rows)[number];
			await pasteRows(desks.coordinator, [faulty, ...rest]);
			await desks.coordinator.see(/Line 2, column 2, e-mail:/);
			await desks.coordinator.keep('21-paste-fault');
			await desks.coordinator.fill('Line 2, e-mail', addressOf('Q23'));
			await desks.coordinator.press(`Add ${rows.length} people`);
			await desks.coordinator.see(`${rows.length} people are added`);
		});

		it('records consent of everybody', async () => {
			const count = await chooseEverybody(desks.coordinator);
			expect(count).toBe(everybody.length + 2);
			await desks.coordinator.press(`Record consent of ${count} people`);
			await desks.coordinator.see(/Consent recorded for /);
			await desks.coordinator.keep('22-consent');
		});

		it('books one person by a chain from the proposals', async () => {
			await openPerson(desks.coordinator, 'Q11');
			await desks.coordinator.follow('Find places');
			await desks.coordinator.see('The earliest chains that keep every rule.');
			await desks.coordinator.keep('23-places');
			await desks.coordinator.press('Book these 4 visits');
			await desks.coordinator.link('Move or cancel').first().waitFor();
			await desks.coordinator.keep('24-booked');
		});

		it('books the others at their earliest places', async () => {
			await chooseEverybody(desks.coordinator);
			await desks.coordinator.hands.tick(desks.coordinator.page.getByLabel('Choose Q11'), false);
			await desks.coordinator.press(`Book the earliest places for ${everybody.length + 1} people`);
			await desks.coordinator.see(`${everybody.length + 1} people are booked`);
			await desks.coordinator.keep('25-all-booked');
		});
	});
}
