import type { Desk } from './desk';

export type StudyFacts = {
	workingTitle: string;
	publicTitle: string;
	prefix: string;
	phone: string;
};

/** Creates a study of two arms; gives its address. */
export async function createStudy(desk: Desk, facts: StudyFacts): Promise<string> {
	await desk.follow('Create a study');
	await desk.fill('Working title', facts.workingTitle);
	await desk.fill('Public title', facts.publicTitle);
	await desk.fill('Letters of the codes', facts.prefix);
	await desk.fill('Phone for participants', facts.phone);
	await desk.tick('radio', /^Two arms over eight visits/);
	await desk.press('Create the study');
	await desk.page.waitForURL(/\/studies\/[0-9a-f-]{36}\/protocol\/draft$/);
	return desk.path().replace('/protocol/draft', '');
}

const visit = (desk: Desk, label: string) => ({
	row: desk.page.locator('details', { has: desk.page.locator('summary', { hasText: label }) }),
	summary: desk.page.locator('summary', { hasText: label })
});

export async function removeVisit(desk: Desk, label: string): Promise<void> {
	await desk.hands.press(visit(desk, label).summary);
	await desk.press(`Remove ${label}`);
	await visit(desk, label).summary.waitFor({ state: 'detached' });
}

/** A visit of twenty minutes with one block of sixty trials. */
export async function shortenVisit(desk: Desk, label: string): Promise<void> {
	const { row, summary } = visit(desk, label);
	await desk.hands.press(summary);
	for (const [field, minutes] of [
		['Length', '20'],
		['Set-up', '5'],
		['Clean-up', '5']
	] as const) {
		await desk.hands.write(row.getByLabel(new RegExp(`^${field}`)), minutes);
	}
	const remove = row.getByRole('button', { name: /^Remove block/ });
	while ((await remove.count()) > 0) await desk.hands.press(remove.last());
	await desk.hands.write(row.getByLabel(/^Trials of block 1/), '60');
	await desk.hands.press(summary);
}

/** Regions only, from the first block on, and everything but the mildest held for a person. */
export async function setRule(desk: Desk): Promise<void> {
	await desk.hands.tick(desk.page.getByRole('checkbox', { name: /^Target shift/ }), false);
	await desk.fill(/^Share of perturbed trials/, '1');
	await desk.fill(/^Until escaped/, '3');
	await desk.fill('Plain blocks first, at least', '1');
	await desk.fill('Plain blocks first, at most', '1');
	await desk.fill(/^Cover without asking/, '0.1');
}

export async function setComparison(desk: Desk): Promise<void> {
	await desk.fill('People per arm', '26');
	const sources = desk.page.getByLabel('Where it comes from');
	await desk.fill(/^Effect d/, '0.8');
	await desk.hands.write(sources.nth(0), 'A pilot of twelve invented people');
	await desk.fill(/^Share of people lost/, '0.1');
	await desk.hands.write(sources.nth(1), 'The lab’s last three studies');
	await desk.fill(/^Share of the effect lost/, '0.05');
	await desk.hands.write(sources.nth(2), 'One missed day in twenty');
}

export async function freeze(desk: Desk): Promise<void> {
	await desk.follow('Say why, and freeze version 1');
	await desk.see('From then on this text has a number and a hash, and never changes.');
	await desk.press('Freeze version 1');
	await desk.see('Version 1 is frozen and can no longer change.');
}

type Approval = { board: string; reference: string; from: string; to: string };

export async function recordApproval(desk: Desk, approval: Approval): Promise<void> {
	await desk.fill('Board', approval.board);
	await desk.fill('Reference of its letter', approval.reference);
	await desk.fill('Approved on', approval.from);
	await desk.fill('Ends after', approval.to);
	await desk.press('Record the approval of version 1');
	await desk.see('The approval of version 1 is recorded.');
}
