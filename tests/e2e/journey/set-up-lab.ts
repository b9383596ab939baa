import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, it } from 'vitest';
import { addDays, moveClock } from '../pages/demo-clock';
import { signInByMail, sitDown } from '../pages/desk';
import {
	addRig,
	addRoom,
	addStaff,
	closeDays,
	fetchServerKey,
	invite,
	makeRigKey,
	setUpLab
} from '../pages/lab-pages';
import { desks, journey, monday, team, type Part } from './world';

export function setUpTheLab() {
	describe('step 0: the steward sets up the lab', () => {
		it('opens the terminal’s link, and names lab and time zone', async () => {
			desks.steward = await sitDown(journey.browser, journey.app, {
				hands: journey.hands
			});
			journey.lab = await setUpLab(desks.steward, journey.app.setupLink ?? '', {
				steward: team.steward,
				name: 'Fjordview Movement Lab',
				zone: 'Europe/Lisbon',
				address: 'Quay Street 4, 1100 Lisbon',
				phone: '+351 21 000 00 00'
			});
			await desks.steward.see('things are missing before visits can be booked');
			await desks.steward.keep('00-lab-missing');
		});

		it('moves the demo clock to a Monday morning', async () => {
			await moveClock(desks.steward, `${monday}T08:00`);
			await desks.steward.keep('01-clock');
		});

		it('enters a room and a rig with limits, hours and key', async () => {
			await addRoom(desks.steward, journey.lab, 'Room 12');
			await addRig(desks.steward, {
				name: 'Gull',
				minutes: '60',
				trials: '300',
				limits: 'release_speed 4\nrelease_position 1.1',
				hours: 'Mon-Fri 09:00-17:00'
			});
			writeFileSync(join(journey.folder, 'rig.json'), await makeRigKey(desks.steward));
			writeFileSync(join(journey.folder, 'server.json'), await fetchServerKey(desks.steward));
			await desks.steward.keep('02-rig');
		});

		it('enters staff and holidays, until nothing is missing', async () => {
			await addStaff(desks.steward, journey.lab, team.steward.name, 'Mon-Fri 09:00-17:00');
			await closeDays(desks.steward, journey.lab, `${addDays(monday, 30)} Harbour day`);
			await desks.steward.open(journey.lab);
			await desks.steward.see('Everything is entered that booking needs');
			await desks.steward.keep('03-lab-complete');
		});

		it('invites six members, who come in by their mailed links', async () => {
			const invited = (Object.keys(team) as Part[]).filter((part) => part !== 'steward');
			for (const part of invited) await invite(desks.steward, journey.lab, team[part]);
			await Promise.all(
				invited.map(async (part) => {
					desks[part] = await sitDown(journey.browser, journey.app, {
						hands: journey.hands
					});
					await signInByMail(desks[part], team[part].email);
				})
			);
			await desks.steward.open(`${journey.lab}/members`);
			await desks.steward.see('7 people can sign in here');
			await desks.steward.keep('04-members');
			await desks.investigator.keep('05-home-of-a-member');
		});
	});
}
