import type { Desk } from './desk';

export type ListedDecision = { code: string; place: string; kind: string; reason: string };

/** Every decision on the approver's list, held ones first. */
export async function listDecisions(desk: Desk): Promise<ListedDecision[]> {
	const rows = await desk.page
		.getByRole('row')
		.filter({ hasText: /visit \d+, block \d+/ })
		.all();
	return Promise.all(
		rows.map(async (row) => {
			const cells = await row.getByRole('cell').allInnerTexts();
			const code = (await row.getByRole('rowheader').innerText()).trim();
			const [place = '', kind = ''] = cells.map((text) => text.trim());
			const reason = (await row.locator('data').getAttribute('value')) ?? '';
			return { code, place, kind, reason };
		})
	);
}

export async function openDecision(desk: Desk, code: string): Promise<void> {
	await desk.section('Decisions');
	const row = desk.page.getByRole('row', { name: new RegExp(`^${code} visit 2`) });
	await desk.hands.press(row.getByRole('link'));
	await desk.page.getByRole('heading', { level: 1, name: `Next block for ${code}` }).waitFor();
}
