import { describe, expect, it } from 'vitest';
import { linkIn } from '../../support/mailbox';
import { sitDown } from '../pages/desk';
import { openVisit } from '../pages/people-pages';
import { addressOf, cancelled, desks, eventOf, everybody, isAbout, journey, unsure } from './world';

export function inviteAndAnswer() {
	describe('steps 3 and 4: invitations leave, participants answer', () => {
		it('everybody gets a calendar request for the baseline visit, and nothing else', async () => {
			for (const { code } of everybody) {
				const mail = await journey.app.mailbox.waitFor(addressOf(code), isAbout('Your visit'));
				expect(mail.calendar?.method).toBe('REQUEST');
				expect(eventOf(mail)?.sequence).toBe(0);
				expect(mail.text).not.toMatch(/regions against/i);
			}
			expect(await journey.app.mailbox.list(addressOf('Q11'))).toHaveLength(1);
		});

		it('one accepts by the link, seeing when, where and whom to call', async () => {
			const mail = await journey.app.mailbox.waitFor(addressOf('Q11'));
			const desk = await sitDown(journey.browser, journey.app, {
				screen: 'phone',
				hands: journey.hands
			});
			await desk.page.goto(linkIn(mail, /\/visit\//));
			await desk.see('Side door, second floor.');
			await desk.tick('radio', /^I come\b/);
			await desk.press('Send my answer');
			await desk.see('You said that you come.');
			await desk.keep('30-participant');
			desk.expectNoComplaints();
			await desk.screen.close();
		});

		it('another declines, which becomes a task on the coordinator’s first page', async () => {
			const mail = await journey.app.mailbox.waitFor(addressOf(unsure));
			const desk = await sitDown(journey.browser, journey.app, {
				screen: 'phone',
				hands: journey.hands
			});
			await desk.page.goto(linkIn(mail, /\/visit\//));
			await desk.tick('radio', /^I cannot come\b/);
			await desk.press('Send my answer');
			await desk.see(/You said that you cannot come/);
			await desk.screen.close();
			await desks.coordinator.open('/home');
			await desks.coordinator.see(new RegExp(unsure));
			await desks.coordinator.keep('31-task');
		});

		it('the coordinator moves that visit, which sends one update of the same event', async () => {
			const [before] = await journey.app.mailbox.list(addressOf(unsure));
			await desks.coordinator.open(`${journey.study}/people`);
			await openVisit(desks.coordinator, unsure, 'Baseline');
			await desks.coordinator.see('They declined');
			await desks.coordinator.keep('32-ways');
			await desks.coordinator.press(/^Move to .*send 1 update/);
			await desks.coordinator.page.getByRole('heading', { level: 1, name: unsure }).waitFor();
			const mail = await journey.app.mailbox.waitFor(addressOf(unsure), isAbout('Visit moved'));
			expect(mail.calendar?.method).toBe('REQUEST');
			expect(eventOf(mail)).toMatchObject({ sequence: 1, uid: eventOf(before)?.uid });
			expect(eventOf(mail)?.start).not.toBe(eventOf(before)?.start);
		});

		it('and cancels somebody’s visit, which takes the event out of their calendar', async () => {
			await openVisit(desks.coordinator, cancelled, 'Baseline');
			await desks.coordinator.press(`Cancel Baseline of ${cancelled}, send 1 mail`);
			const mail = await journey.app.mailbox.waitFor(
				addressOf(cancelled),
				isAbout('Visit cancelled')
			);
			expect(mail.calendar?.method).toBe('CANCEL');
		});
	});
}
