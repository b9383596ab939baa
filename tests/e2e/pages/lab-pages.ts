import { readFileSync } from 'node:fs';
import type { Desk } from './desk';

export type LabFacts = {
	steward: { name: string; email: string };
	name: string;
	zone: string;
	address: string;
	phone: string;
};

/** The page behind the link that the terminal prints. */
export async function setUpLab(desk: Desk, link: string, facts: LabFacts): Promise<string> {
	await desk.page.goto(link);
	await desk.fill('Your name', facts.steward.name);
	await desk.fill('Your e-mail address', facts.steward.email);
	await desk.fill('Its name', facts.name);
	await desk.fill('Time zone', facts.zone);
	await desk.fill(/^Address/, facts.address);
	await desk.fill(/^Telephone/, facts.phone);
	await desk.press('Set up the lab and sign me in');
	await desk.page.waitForURL(/\/lab\/[0-9a-f-]{36}$/);
	return desk.path();
}

export async function addRoom(desk: Desk, lab: string, name: string): Promise<void> {
	await desk.open(`${lab}/rigs`);
	await desk.fill('Room', name);
	await desk.fill(/^How to get there/, 'Side door, second floor.');
	await desk.press('Add the room');
	await desk.see(`${name} is added.`);
}

type RigFacts = { name: string; minutes: string; trials: string; limits: string; hours: string };

/** A powered rig with checked limits and weekly hours. */
export async function addRig(desk: Desk, facts: RigFacts): Promise<void> {
	await desk.follow('Add a rig');
	await desk.fill('Name', facts.name);
	await desk.fill(/^Longest visit/, facts.minutes);
	await desk.fill(/^Most trials in a visit/, facts.trials);
	await desk.tick('checkbox', /^Powered/);
	await desk.fill(/^Largest values/, facts.limits);
	await desk.tick('checkbox', /^Qualified staff/);
	await desk.press('Add the rig');
	await desk.see(`${facts.name} is added`);
	await desk.fill('Weekly hours', facts.hours);
	await desk.press('Keep these hours');
	await desk.see('These hours hold from now on.');
}

/** Makes a key pair on the rig's page; gives the private half, which is saved once. */
export async function makeRigKey(desk: Desk): Promise<string> {
	const saving = desk.page.waitForEvent('download');
	await desk.press('Make a key pair here');
	const file = await saving;
	await desk.see('The private half was saved once');
	await desk.press('Keep this public key');
	await desk.see('is in use');
	return readFileSync(await file.path(), 'utf8');
}

/** The public half of the key with which Ovalry signs files, for the rig. */
export async function fetchServerKey(desk: Desk): Promise<string> {
	const saving = desk.page.waitForEvent('download');
	await desk.follow('Fetch Ovalry’s public key');
	return readFileSync(await (await saving).path(), 'utf8');
}

export async function addStaff(desk: Desk, lab: string, member: string, hours: string) {
	await desk.open(`${lab}/staff`);
	await desk.choose('Which member it is', member);
	await desk.fill('Weekly hours', hours);
	await desk.press('Add to the staff');
	await desk.see(`${member} is added.`);
}

export async function closeDays(desk: Desk, lab: string, lines: string): Promise<void> {
	await desk.open(`${lab}/holidays`);
	await desk.fill(/^Days, one line each/, lines);
	await desk.press('Close these days');
	await desk.see(/closed\./);
}

export async function invite(desk: Desk, lab: string, member: { name: string; email: string }) {
	await desk.open(`${lab}/members`);
	await desk.fill('Their name', member.name);
	await desk.fill('Their e-mail address', member.email);
	await desk.press(`Invite ${member.name}`);
	await desk.see(`on its way to ${member.email}`);
}

/** Gives a role on the page Team, which must be open. */
export async function giveRole(desk: Desk, name: string, role: string): Promise<void> {
	await desk.choose('Member', name);
	await desk.tick('radio', new RegExp(`^${role}`));
	await desk.press(`Make ${name} ${role.toLowerCase()}`);
	await desk.see(new RegExp(`${name} is (to be )?${role.toLowerCase()}`));
}
