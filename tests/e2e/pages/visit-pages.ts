import { readFileSync } from 'node:fs';
import type { Desk } from './desk';

export type TrialFile = { name: string; text: string };

/** Chooses a file on the page Trials in and has it read; nothing is stored yet. */
export async function readTrials(desk: Desk, file: TrialFile): Promise<void> {
	await desk.section('Visits');
	await desk.follow('Upload trials');
	await desk.hands.give(desk.page.getByLabel('Trial file'), {
		name: file.name,
		mimeType: 'text/csv',
		buffer: Buffer.from(file.text)
	});
	await desk.see(new RegExp(`${file.name.replace('.', '\\.')}: \\d+ rows`));
}

export async function storeTrials(desk: Desk, count: number): Promise<void> {
	await desk.press(`Store ${count} trials`);
}

/** Fetches the file of a ready block from the board. */
export async function fetchBlock(desk: Desk, code: string, visit: number) {
	const saving = desk.page.waitForEvent('download');
	await desk.follow(`fetch its file of ${code}, visit ${visit}, block 1`);
	const file = await saving;
	return { name: file.suggestedFilename(), text: readFileSync(await file.path(), 'utf8') };
}
