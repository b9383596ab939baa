import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { describeKind } from '$lib/decisions/kind-words';
import { startApp, type AppServer } from '../support/app-server';
import { openBrowser, type TestBrowser } from '../support/browser';
import { linkIn, type StoredMail } from '../support/mailbox';
import { listDecisions, openDecision } from './pages/decision-pages';
import { addDays, findMonday, moveClock } from './pages/demo-clock';
import { signInByMail, sitDown, type Desk } from './pages/desk';
import {
	addRig,
	addRoom,
	addStaff,
	closeDays,
	fetchServerKey,
	giveRole,
	invite,
	makeRigKey,
	setUpLab
} from './pages/lab-pages';
import { addPerson, chooseEverybody, openPerson, openVisit, pasteRows } from './pages/people-pages';
import {
	createStudy,
	freeze,
	recordApproval,
	removeVisit,
	setComparison,
	setRule,
	shortenVisit
} from './pages/protocol-pages';
import { addColumn, expectDecision, makeTrialFile } from './pages/puck-trials';
import { fetchBlock, readTrials, storeTrials } from './pages/visit-pages';

/**
 * The thin path on an empty lab, step by step as the role whose step it is, by visible controls
 * alone. Each person sits at a browser of their own; time moves by the demo clock's page only.
 */

const team = {
	steward: { name: 'Sigrid Tangen', email: 'sigrid@fjordview.example' },
	investigator: { name: 'Inga Frey', email: 'inga@fjordview.example' },
	coordinator: { name: 'Cora Lind', email: 'cora@fjordview.example' },
	operator: { name: 'Otto Brandt', email: 'otto@fjordview.example' },
	statistician: { name: 'Stella Maro', email: 'stella@fjordview.example' },
	unblinded: { name: 'Umar Dahl', email: 'umar@fjordview.example' },
	approver: { name: 'Ada Petrov', email: 'ada@fjordview.example' }
};
type Part = keyof typeof team;

/** The six simulated people, and seven more whose trials give a region as well. */
const steady = ['Q11', 'Q23', 'Q64', 'Q12', 'Q13', 'Q14', 'Q15', 'Q16', 'Q17', 'Q18'].map(
	(code) => ({ code, like: ['Q23', 'Q64'].includes(code) ? code : 'Q11' })
);
const others = ['Q37', 'Q42', 'Q58'].map((code) => ({ code, like: code }));
const everybody = [...steady, ...others];
/** Whoever declines, and is not measured. */
const unsure = 'Q99';
const addressOf = (code: string) => `${code.toLowerCase()}@people.example`;
const newcomer = (code: string) => ({ name: `Invented ${code}`, email: addressOf(code), code });

const monday = findMonday(Date.now());
/** When every baseline visit is over; the first day of practice is Thursday. */
const tuesdayEvening = `${addDays(monday, 1)}T18:00`;
const wednesday = addDays(monday, 2);
const thursday = addDays(monday, 3);
const checkout = resolve(import.meta.dirname, '../..');

let app: AppServer;
let browser: TestBrowser;
let folder: string;
const desks = {} as Record<Part, Desk>;
let lab: string;
let study: string;
let held: string[];

beforeAll(async () => {
	folder = mkdtempSync(join(tmpdir(), 'ovalry-journey-'));
	[app, browser] = await Promise.all([startApp('rehearsal'), openBrowser()]);
});
afterAll(async () => {
	await browser?.close();
	await app?.stop();
	rmSync(folder, { recursive: true, force: true });
});

const eventOf = (mail: StoredMail | undefined) => mail?.calendar?.events[0];
const isAbout = (start: string) => (mail: StoredMail) => mail.subject.startsWith(start);

describe('step 0: the steward sets up the lab', () => {
	it('opens the terminal’s link, and names lab and time zone', async () => {
		desks.steward = await sitDown(browser, app);
		lab = await setUpLab(desks.steward, app.setupLink ?? '', {
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
		await addRoom(desks.steward, lab, 'Room 12');
		await addRig(desks.steward, {
			name: 'Gull',
			minutes: '60',
			trials: '300',
			limits: 'release_speed 4\nrelease_position 1.1',
			hours: 'Mon-Fri 09:00-17:00'
		});
		writeFileSync(join(folder, 'rig.json'), await makeRigKey(desks.steward));
		writeFileSync(join(folder, 'server.json'), await fetchServerKey(desks.steward));
		await desks.steward.keep('02-rig');
	});

	it('enters staff and holidays, until nothing is missing', async () => {
		await addStaff(desks.steward, lab, team.steward.name, 'Mon-Fri 09:00-17:00');
		await closeDays(desks.steward, lab, `${addDays(monday, 30)} Harbour day`);
		await desks.steward.open(lab);
		await desks.steward.see('Everything is entered that booking needs');
		await desks.steward.keep('03-lab-complete');
	});

	it('invites six members, who come in by their mailed links', async () => {
		const invited = (Object.keys(team) as Part[]).filter((part) => part !== 'steward');
		for (const part of invited) await invite(desks.steward, lab, team[part]);
		await Promise.all(
			invited.map(async (part) => {
				desks[part] = await sitDown(browser, app);
				await signInByMail(desks[part], team[part].email);
			})
		);
		await desks.steward.open(`${lab}/members`);
		await desks.steward.see('7 people can sign in here');
		await desks.steward.keep('04-members');
		await desks.investigator.keep('05-home-of-a-member');
	});
});

describe('step 1: protocol, power, approval and seal', () => {
	it('the investigator creates a study from the pattern of two arms', async () => {
		study = await createStudy(desks.investigator, {
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
		await desks.steward.open(`${study}/team`);
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
		await desks.coordinator.open(`${study}/people`);
		await desks.coordinator.see('Enrolment, booking and invitations are shut');
		expect(await desks.coordinator.link('Add a person').count()).toBe(0);
		await desks.coordinator.keep('15-shut');
	});

	it('the statistician reads the power and signs off', async () => {
		await desks.statistician.open(`${study}/power`);
		await desks.statistician.keep('16-power');
		await desks.statistician.press(/^Sign off version 1, /);
		await desks.statistician.button('Take it back with a comment').waitFor();
	});

	it('the unblinded statistician draws and seals the allocation', async () => {
		await desks.unblinded.open(`${study}/allocation`);
		await desks.unblinded.page.getByRole('checkbox', { name: '2 people' }).check();
		await desks.unblinded.page.getByRole('checkbox', { name: '4 people' }).check();
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

describe('step 2: the coordinator enrols and books', () => {
	it('adds one person by the form', async () => {
		await desks.coordinator.open(`${study}/people`);
		await addPerson(desks.coordinator, newcomer('Q11'));
		await desks.coordinator.keep('20-added');
	});

	it('pastes the others; a fault is named by line and column, and mended in place', async () => {
		const rows = [
			...everybody.slice(1).map(({ code }) => newcomer(code)),
			newcomer('Q98'),
			newcomer(unsure)
		];
		const [first, ...rest] = rows;
		const faulty = { ...first, email: 'q23.people.example' } as (typeof rows)[number];
		await pasteRows(desks.coordinator, [faulty, ...rest]);
		await desks.coordinator.see(/Line 2, column 2, e-mail:/);
		await desks.coordinator.keep('21-paste-fault');
		await desks.coordinator.page.getByLabel('Line 2, e-mail').fill(addressOf('Q23'));
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
		await desks.coordinator.page.getByLabel('Choose Q11').uncheck();
		await desks.coordinator.press(`Book the earliest places for ${everybody.length + 1} people`);
		await desks.coordinator.see(`${everybody.length + 1} people are booked`);
		await desks.coordinator.keep('25-all-booked');
	});
});

describe('steps 3 and 4: invitations leave, participants answer', () => {
	it('everybody gets a calendar request for the baseline visit, and nothing else', async () => {
		for (const { code } of everybody) {
			const mail = await app.mailbox.waitFor(addressOf(code), isAbout('Your visit'));
			expect(mail.calendar?.method).toBe('REQUEST');
			expect(eventOf(mail)?.sequence).toBe(0);
			expect(mail.text).not.toMatch(/regions against/i);
		}
		expect(await app.mailbox.list(addressOf('Q11'))).toHaveLength(1);
	});

	it('one accepts by the link, seeing when, where and whom to call', async () => {
		const mail = await app.mailbox.waitFor(addressOf('Q11'));
		const desk = await sitDown(browser, app, { screen: 'phone' });
		await desk.page.goto(linkIn(mail, /\/visit\//));
		await desk.see('Side door, second floor.');
		await desk.page.getByText('I come', { exact: true }).click();
		await desk.press('Send my answer');
		await desk.see('You said that you come.');
		await desk.keep('30-participant');
		desk.expectNoComplaints();
		await desk.screen.close();
	});

	it('another declines, which becomes a task on the coordinator’s first page', async () => {
		const mail = await app.mailbox.waitFor(addressOf(unsure));
		const desk = await sitDown(browser, app, { screen: 'phone' });
		await desk.page.goto(linkIn(mail, /\/visit\//));
		await desk.page.getByText('I cannot come', { exact: true }).click();
		await desk.press('Send my answer');
		await desk.see(/You said that you cannot come/);
		await desk.screen.close();
		await desks.coordinator.open('/home');
		await desks.coordinator.see(new RegExp(unsure));
		await desks.coordinator.keep('31-task');
	});

	it('the coordinator moves that visit, which sends one update of the same event', async () => {
		const [before] = await app.mailbox.list(addressOf(unsure));
		await desks.coordinator.open(`${study}/people`);
		await openVisit(desks.coordinator, unsure, 'Baseline');
		await desks.coordinator.see('They declined');
		await desks.coordinator.keep('32-ways');
		await desks.coordinator.press(/^Move to .*send 1 update/);
		await desks.coordinator.page.getByRole('heading', { level: 1, name: unsure }).waitFor();
		const mail = await app.mailbox.waitFor(addressOf(unsure), isAbout('Visit moved'));
		expect(mail.calendar?.method).toBe('REQUEST');
		expect(eventOf(mail)).toMatchObject({ sequence: 1, uid: eventOf(before)?.uid });
		expect(eventOf(mail)?.start).not.toBe(eventOf(before)?.start);
	});

	it('and cancels somebody’s visit, which takes the event out of their calendar', async () => {
		await openVisit(desks.coordinator, 'Q98', 'Baseline');
		await desks.coordinator.press('Cancel Baseline of Q98, send 1 mail');
		const mail = await app.mailbox.waitFor(addressOf('Q98'), isAbout('Visit cancelled'));
		expect(mail.calendar?.method).toBe('CANCEL');
	});
});

describe('step 5: the operator brings trials in', () => {
	const file = makeTrialFile('baseline.csv', { day: 1, people: steady });

	it('a visit that has not begun is refused', async () => {
		await desks.operator.open(`${study}/visits`);
		const early = makeTrialFile('early.csv', { day: 2, people: [{ code: 'Q11', like: 'Q11' }] });
		await readTrials(desks.operator, early);
		await desks.operator.see(/visit 2 of Q11 is on .*: it has not begun/);
		await desks.operator.keep('50-not-begun');
	});

	it('once all have been there, the wrong person is refused by code, line and column', async () => {
		await moveClock(desks.operator, tuesdayEvening);
		await desks.operator.open(`${study}/visits`);
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

describe('steps 6 to 8: allocated, decided, settled, run', () => {
	it('everybody gets a decision; in the adaptive arm it is the expected one', async () => {
		const { approver } = desks;
		await approver.open(`${study}/decisions`);
		const next = async () => {
			await approver.page.reload();
			return (await listDecisions(approver)).filter(({ place }) => place.startsWith('visit 2'));
		};
		await expect
			.poll(async () => (await next()).length, { timeout: 60_000, interval: 1000 })
			.toBe(everybody.length);
		await approver.keep('60-decisions');
		const found = new Map((await next()).map((row) => [row.code, row]));
		const adaptive = everybody.filter(({ code }) => found.get(code)?.reason !== 'PROTOCOL-BLOCK');
		for (const { code, like } of adaptive) {
			const { kind, code: reason } = expectDecision(like);
			expect(found.get(code)).toMatchObject({ kind: describeKind(kind), reason });
		}
		const isAdaptive = new Set(adaptive.map(({ code }) => code));
		held = steady.map(({ code }) => code).filter((code) => isAdaptive.has(code));
		expect(held.length).toBeGreaterThanOrEqual(4);
		expect(adaptive.length).toBeLessThan(everybody.length);
	});

	it('the approver reads cloud, ladder and reasons, and uses one as proposed', async () => {
		const { approver } = desks;
		await openDecision(approver, held[0] ?? '');
		await approver.see('Held, not automatic:');
		await approver.see('How it was chosen');
		await approver.keep('61-decision');
		await approver.press('Use this block');
		await approver.see('Used as proposed');
	});

	it('changes one with a reason', async () => {
		const { approver } = desks;
		await openDecision(approver, held[1] ?? '');
		await approver.press('Change and say why');
		await approver.see(/Say why, in a sentence/);
		await approver.fill('Why', 'Tired today: a smaller region is enough.');
		await approver.page.getByLabel(/^Size of the region/).fill('70');
		await approver.press('Change and say why');
		await approver.see('Tired today: a smaller region is enough.');
		await approver.see('Changed');
		await approver.keep('62-changed');
	});

	it('runs plain practice instead of one', async () => {
		const { approver } = desks;
		await openDecision(approver, held[2] ?? '');
		await approver.fill('Why', 'A sore shoulder: plain practice this time.');
		await approver.press('Run plain practice');
		await approver.see('Plain practice instead');
	});

	it('the operator sees “not yet” the day before', async () => {
		const { operator } = desks;
		await moveClock(operator, `${wednesday}T08:00`);
		await operator.open(`${study}/visits`);
		await operator.see(/block 1: not yet, from Wed/);
		for (const { code } of steady) {
			expect(await operator.link(`Fetch the file of ${code}, visit 2, block 1`).count()).toBe(0);
		}
		await operator.keep('63-not-yet');
	});

	it('and “ready” in both arms once the hour has come', async () => {
		const { operator } = desks;
		await moveClock(operator, `${thursday}T04:30`);
		await operator.open(`${study}/visits`);
		for (const { code } of steady) {
			await operator.link(`Fetch the file of ${code}, visit 2, block 1`).waitFor();
		}
		await operator.keep('64-ready');
	});

	it('the rig opens its block, and refuses that of another visit or person', async () => {
		const { operator } = desks;
		const code = held[0] ?? '';
		const block = await fetchBlock(operator, code, 2);
		expect(block.name).toContain(code);
		writeFileSync(join(folder, 'block.jwe'), block.text);
		const open = (person: string, visit: string) =>
			spawnSync(
				'/usr/bin/python3',
				[
					join(checkout, 'static/examples/open_block.py'),
					join(folder, 'block.jwe'),
					...['--rig-key', join(folder, 'rig.json'), '--server-key', join(folder, 'server.json')],
					...['--participant', person, '--visit', visit, '--block', '1'],
					...['--now', `${thursday}T08:00:00Z`]
				],
				{ encoding: 'utf8' }
			);
		const opened = open(code, '2');
		expect(opened.stderr).toBe('');
		expect(JSON.parse(opened.stdout)).toMatchObject({
			participant: code,
			visit: 2,
			plan: { kind: 'region' }
		});
		expect(open(code, '3').stderr).toContain('refused: it is for visit 2, not 3');
		expect(open('Q00', '2').status).toBe(1);
	});

	it('files of every person have one size', async () => {
		const { operator } = desks;
		const sizes = new Set<number>();
		for (const { code } of steady) {
			sizes.add((await fetchBlock(operator, code, 2)).text.length);
		}
		expect(sizes.size).toBe(1);
	});

	it('what was left got the declared fallback', async () => {
		const { approver } = desks;
		await openDecision(approver, held[3] ?? '');
		await approver.see('The fallback runs: plain practice');
		await approver.keep('65-fallback');
	});

	it('every decision replays to the same bytes, from the page and the command line', async () => {
		const { approver } = desks;
		await approver.press('Replay this decision from the record');
		await approver.see('Replays to the same bytes');
		await approver.section('Decisions');
		await approver.press('Replay all from the record');
		await approver.see(/(\d+) of \1 decisions replay to the same bytes/);
		await approver.keep('66-replay');
		const replayed = spawnSync(process.execPath, [join(checkout, 'build/workers/replay.js')], {
			env: { ...process.env, ...app.environment },
			encoding: 'utf8'
		});
		expect(replayed.stdout).toMatch(/: (\d+) of \1 decisions replay to the same bytes/);
		expect(replayed.status).toBe(0);
	});

	it('the investigator finds no decisions, only counts', async () => {
		const reply = await desks.investigator.open(`${study}/decisions`);
		expect(reply?.status()).toBe(404);
		await desks.investigator.keep('67-investigator');
	});

	it('no page complained to its console', () => {
		for (const desk of Object.values(desks)) desk.expectNoComplaints();
	});
});
