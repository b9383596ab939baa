import { afterAll, beforeAll, describe, it } from 'vitest';
import type { HandsKind } from '../pages/hands';
import { bringTrialsIn } from './bring-trials-in';
import { decideAndRun } from './decide-and-run';
import { enrolAndBook } from './enrol-and-book';
import { inviteAndAnswer } from './invite-and-answer';
import { moveOnTheCalendar } from './move-on-the-calendar';
import { planTheStudy } from './plan-study';
import { setUpTheLab } from './set-up-lab';
import { beginJourney, desks, endJourney } from './world';

/**
 * The thin path on an empty lab, step by step as the role whose step it is, by visible controls
 * alone. Each person sits at a browser of their own; time moves by the demo clock's page only.
 */
export function goTheWholePath(hands: HandsKind) {
	beforeAll(() => beginJourney(hands));
	afterAll(endJourney);

	setUpTheLab();
	planTheStudy();
	enrolAndBook();
	moveOnTheCalendar(hands);
	inviteAndAnswer();
	bringTrialsIn();
	decideAndRun();

	describe('the whole way', () => {
		it('no page complained to its console', () => {
			for (const desk of Object.values(desks)) desk.expectNoComplaints();
		});
	});
}
