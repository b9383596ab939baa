import { describe, expect, it } from 'vitest';
import { addDays } from '../pages/demo-clock';
import { giveRole } from '../pages/lab-pages';
import {
	createStudy,
	freeze,
	recordApproval,
	removeVisit,
	setComparison,
	setRule,
	shortenVisit
} from '../pages/protocol-pages';
import { desks, journey, monday, team } from './world';

export function planTheStudy() {
	describe('step 1: protocol, power, approval and seal', () => {
		it('the investigator creates a study from the pattern of two arms', async () => {
			journey.study = await createStudy(desks.investigator, {
				workingTitle: 'Regions against plain practice',
				publicTitle: 'Practising a sliding movement',
				prefix: 'FV',
				phone: '+351 21 000 00 01'
			});
			await desks.investigator.keep('10-draft');
		});

		it('and shapes visits, blocks, aims and guard rails', async () => {
			for (const day of [6, 5, 4, 3]) await removeVisit(desks.investigator, `Day ${day}`);
			for (const visit of ['Baseline', 'Day 1', 'Day 2']) {
				await shortenVisit(desks.investigator, visit);
			}
			await setRule(desks.investigator);
			await setComparison(desks.investigator);
			await desks.investigator.see('Ready to freeze');
			await desks.investigator.see('All changes saved');
			await desks.investigator.keep('11-draft-shaped');
		});

		it('and freezes version 1; every missing gate is named', async () => {
			await freeze(desks.investigator);
			await desks.investigator.see('What keeps enrolment shut');
			for (const step of ['statistician', 'investigator', 'unblinded statistician']) {
				await desks.investigator.see(`Step of the ${step}.`);
			}
			await desks.investigator.keep('12-frozen');
		});

		it('the steward gives roles; a second person confirms those that see arms', async () => {
			await desks.steward.open(`${journey.study}/team`);
			await giveRole(desks.steward, team.coordinator.name, 'Coordinator');
			await giveRole(desks.steward, team.operator.name, 'Operator');
			await giveRole(desks.steward, team.statistician.name, 'Statistician');
			await giveRole(desks.steward, team.unblinded.name, 'Unblinded statistician');
			await giveRole(desks.steward, team.approver.name, 'Approver');
			await desks.steward.keep('13-team-waiting');
			await desks.investigator.section('Team');
			await desks.investigator.press(`Confirm ${team.unblinded.name} as unblinded statistician`);
			await desks.investigator.see(`${team.unblinded.name} is unblinded statistician now.`);
			await desks.investigator.press(`Confirm ${team.approver.name} as approver`);
			await desks.investigator.see(`${team.approver.name} is approver now.`);
			await desks.investigator.keep('14-team');
		});

		it('the coordinator finds enrolment shut, and reads why', async () => {
			await desks.coordinator.open(`${journey.study}/people`);
			await desks.coordinator.see('Enrolment, booking and invitations are shut');
			expect(await desks.coordinator.link('Add a person').count()).toBe(0);
			await desks.coordinator.keep('15-shut');
		});

		it('the statistician reads the power and signs off', async () => {
			await desks.statistician.open(`${journey.study}/power`);
			await desks.statistician.keep('16-power');
			await desks.statistician.press(/^Sign off version 1, /);
			await desks.statistician.button('Take it back with a comment').waitFor();
		});

		it('the unblinded statistician draws and seals the allocation', async () => {
			await desks.unblinded.open(`${journey.study}/allocation`);
			await desks.unblinded.tick('checkbox', '2 people');
			await desks.unblinded.tick('checkbox', '4 people');
			await desks.unblinded.press('Draw and seal the allocation of version 1');
			await desks.unblinded.see('Version 1, sealed');
			await desks.unblinded.see('Commitment');
			await desks.unblinded.keep('17-sealed');
		});

		it('the investigator records the ethics approval, and all gates are open', async () => {
			await desks.investigator.section('Protocol');
			await recordApproval(desks.investigator, {
				board: 'Invented Review Board',
				reference: 'IRB-11',
				from: monday,
				to: addDays(monday, 365)
			});
			await desks.investigator.see('Version 1 runs');
			await desks.investigator.keep('18-runs');
		});
	});
}
