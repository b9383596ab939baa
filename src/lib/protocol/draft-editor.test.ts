import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { DraftEditor } from './draft-editor.svelte';
import { createPatternDraft } from './patterns';
import type { SaveDraftBody, SaveDraftReply } from './save-draft-request';

let sent: SaveDraftBody[];
let answer: () => SaveDraftReply | null;

beforeEach(() => {
	vi.useFakeTimers();
	sent = [];
	answer = () => ({ state: 'saved', revision: sent.length, enteredBy: {} });
	vi.stubGlobal('fetch', async (_address: string, { body }: { body: string }) => {
		sent.push(JSON.parse(body) as SaveDraftBody);
		const reply = answer();
		if (!reply) throw new TypeError('offline');
		return new Response(JSON.stringify(reply));
	});
});
afterEach(() => {
	vi.useRealTimers();
	vi.unstubAllGlobals();
});

function createEditor(): DraftEditor {
	const draft = createPatternDraft('two-arms');
	return new DraftEditor({ address: '/draft', number: 1, revision: 0, draft });
}

function type(editor: DraftEditor, text: string): void {
	editor.draft.consentTextVersion = text;
	editor.notice(JSON.stringify(editor.draft));
}

describe('the draft in the page', () => {
	it('is saved once, when typing rests', async () => {
		const editor = createEditor();
		for (const text of ['2', '22', '222']) type(editor, text);
		expect(editor.state).toBe('waiting');
		await vi.advanceTimersByTimeAsync(1000);
		expect(sent.map(({ revision, draft }) => [revision, draft.consentTextVersion])).toEqual([
			[0, '222']
		]);
		expect([editor.state, editor.revision]).toEqual(['saved', 1]);
	});

	it('tries again until the server answers', async () => {
		const editor = createEditor();
		answer = () => null;
		type(editor, '2');
		await vi.advanceTimersByTimeAsync(1000);
		expect(editor.state).toBe('offline');
		answer = () => ({ state: 'saved', revision: 1, enteredBy: {} });
		await vi.advanceTimersByTimeAsync(3000);
		expect(editor.state).toBe('saved');
	});

	it('sends nothing more after a stale save until the person has chosen', async () => {
		const editor = createEditor();
		const theirs = { ...createPatternDraft('two-arms'), consentTextVersion: 'theirs' };
		answer = () => ({ state: 'stale', revision: 7, draft: theirs });
		type(editor, 'mine');
		await vi.advanceTimersByTimeAsync(1000);
		type(editor, 'mine, longer');
		await vi.advanceTimersByTimeAsync(20_000);
		expect(editor.state).toBe('stale');
		expect(sent).toHaveLength(1);
		answer = () => ({ state: 'saved', revision: 8, enteredBy: {} });
		editor.settle('mine');
		await vi.advanceTimersByTimeAsync(1000);
		expect(sent.at(-1)).toMatchObject({
			revision: 7,
			draft: { consentTextVersion: 'mine, longer' }
		});
		expect(editor.state).toBe('saved');
	});

	it('brings back what was typed when theirs was taken by mistake', async () => {
		const editor = createEditor();
		const theirs = { ...createPatternDraft('two-arms'), consentTextVersion: 'theirs' };
		answer = () => ({ state: 'stale', revision: 7, draft: theirs });
		type(editor, 'mine');
		await vi.advanceTimersByTimeAsync(1000);
		editor.settle('theirs');
		expect(editor.draft.consentTextVersion).toBe('theirs');
		editor.undo();
		expect(editor.draft.consentTextVersion).toBe('mine');
	});

	it('goes back through what was saved', async () => {
		const editor = createEditor();
		for (const text of ['2', '3']) {
			type(editor, text);
			await vi.advanceTimersByTimeAsync(1000);
		}
		editor.undo();
		expect(editor.draft.consentTextVersion).toBe('2');
		editor.undo();
		expect(editor.draft.consentTextVersion).toBe('1');
		expect(editor.canUndo).toBe(false);
	});

	it('says when the version was frozen meanwhile', async () => {
		const editor = createEditor();
		answer = () => ({ state: 'gone' });
		type(editor, '2');
		await vi.advanceTimersByTimeAsync(1000);
		expect([editor.state, editor.draft.consentTextVersion]).toEqual(['gone', '2']);
	});
});
