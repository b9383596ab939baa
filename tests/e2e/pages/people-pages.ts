import type { Desk } from './desk';

export type Newcomer = { name: string; email: string; code: string };

/** Enrols one person by the form. */
export async function addPerson(desk: Desk, person: Newcomer): Promise<void> {
	await desk.section('People');
	await desk.follow('Add a person');
	await desk.fill('Name', person.name);
	await desk.fill('E-mail', person.email);
	await desk.fill(/^Code/, person.code);
	await desk.press('Add this person');
	await desk.link(person.code).waitFor();
}

/** Pastes rows and has them read; nothing is stored yet. */
export async function pasteRows(desk: Desk, people: readonly Newcomer[]): Promise<void> {
	await desk.section('People');
	await desk.follow(/^Paste rows/);
	const rows = people.map(({ name, email, code }) => [name, email, code].join('\t'));
	await desk.fill('Rows', ['name\te-mail\tcode', ...rows].join('\n'));
	await desk.press('Read these rows');
	await desk.see(/will be added/);
}

/** Chooses everybody in the list and says what is to be done with them. */
export async function chooseEverybody(desk: Desk): Promise<number> {
	await desk.section('People');
	await desk.follow(/^All( \d|$)/);
	await desk.page.waitForURL(/view=all/);
	const boxes = desk.page.getByRole('checkbox', { name: /^Choose / });
	for (const box of await boxes.all()) await desk.hands.tick(box);
	return boxes.count();
}

export async function openPerson(desk: Desk, code: string): Promise<void> {
	await desk.section('People');
	await desk.hands.write(desk.page.getByRole('searchbox', { name: 'Find a code' }), code);
	await desk.hands.press(desk.page.getByRole('link', { name: code, exact: true }));
	await desk.page.getByRole('heading', { level: 1, name: code }).waitFor();
}

/** Opens one of the person's visits, by its row in their table. */
export async function openVisit(desk: Desk, code: string, visit: string): Promise<void> {
	await openPerson(desk, code);
	const row = desk.page.getByRole('row', { name: new RegExp(`^${visit}`) });
	await desk.hands.press(row.getByRole('link'));
	await desk.page.getByRole('heading', { level: 1, name: `${code}, ${visit}` }).waitFor();
}
