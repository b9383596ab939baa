import { describe, it } from 'vitest';
import { addDays } from '../pages/demo-clock';
import type { HandsKind } from '../pages/hands';
import { desks, journey, monday } from './world';

/** The first person's second day of practice, on the week view. A drag needs a pointer. */
export function moveOnTheCalendar(hands: HandsKind) {
	describe('step 2: the coordinator moves visits on the calendar', () => {
		const visit = (label: string) =>
			desks.coordinator.page.getByRole('button', { name: new RegExp(`^Q11.*, ${label}, `) });

		it('by keys alone: M, an arrow, Enter', async () => {
			const { coordinator } = desks;
			await coordinator.section('Calendar');
			await coordinator.open(`${journey.study}/calendar?week=${monday}`);
			await coordinator.hands.goTo(visit('Day 2'));
			await coordinator.page.keyboard.press('m');
			await coordinator.see('Where Day 2 may go');
			await coordinator.keep('26-where-it-may-go');
			await coordinator.page.keyboard.press('ArrowDown');
			await coordinator.see('Keeps every rule of the chain.');
			await coordinator.page.keyboard.press('Enter');
			await coordinator.see('Q11, Day 2 is moved.');
			await coordinator.keep('27-moved');
		});

		if (hands === 'keyboard') return;
		it('not to an impossible place, which is refused with the rule’s name', async () => {
			const { coordinator } = desks;
			const { page } = coordinator;
			const from = await visit('Day 2').boundingBox();
			const column = page.locator(`.fc-timegrid-col[data-date="${addDays(monday, 1)}"]`);
			const to = await column.boundingBox();
			if (!from || !to) throw new Error('the grid shows no Day 2');
			await page.mouse.move(from.x + from.width / 2, from.y + from.height / 2);
			await page.mouse.down();
			await page.mouse.move(to.x + to.width / 2, from.y + from.height / 2 + 4, { steps: 12 });
			await page.mouse.up();
			await coordinator.see(/cannot be$/);
			await coordinator.see('Nothing has been changed.');
			await coordinator.keep('28-refused');
			await coordinator.press('Put it back');
		});
	});
}
