import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { DraftEditor } from './draft-editor.svelte';
import { copyVisit } from './edit/visits';
import { DraftKeeper } from './kept-draft';
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
	editor.notice();
}

const keeper = (store: ReturnType<typeof memory>) =>
	new DraftKeeper(store, { address: '/draft', number: 1, who: 'inga@fjordview.example' });

function memory() {
	const kept = new Map<string, string>();
	return {
		getItem: (key: string) => kept.get(key) ?? null,
		setItem: (key: string, value: string) => void kept.set(key, value),
		removeItem: (key: string) => void kept.delete(key)
	};
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

	it('goes back and forth through everything that was done, saved or not', async () => {
		const editor = createEditor();
		for (const text of ['2', '3']) {
			type(editor, text);
			await vi.advanceTimersByTimeAsync(1100);
		}
		editor.apply((draft) => copyVisit(draft, 1), 'copying Day 1');
		expect(editor.undoLabel).toBe('copying Day 1');
		const whole = editor.snapshot;
		editor.undo();
		expect(editor.draft.visits).toHaveLength(8);
		editor.undo();
		editor.undo();
		expect(editor.draft.consentTextVersion).toBe('1');
		expect([editor.undoLabel, editor.redoLabel]).toEqual([null, 'what was typed']);
		for (let step = 0; step < 3; step += 1) editor.redo();
		expect(editor.snapshot).toBe(whole);
		expect(editor.draft.visits).toHaveLength(9);
	});

	it('counts what is typed in one field within a second as one step', async () => {
		const editor = createEditor();
		for (const text of ['2', '22', '222']) {
			type(editor, text);
			await vi.advanceTimersByTimeAsync(300);
		}
		await vi.advanceTimersByTimeAsync(1000);
		type(editor, '2221');
		editor.undo();
		expect(editor.draft.consentTextVersion).toBe('222');
		editor.undo();
		expect(editor.draft.consentTextVersion).toBe('1');
	});

	it('saves what was typed while another save was on its way', async () => {
		const editor = createEditor();
		type(editor, '2');
		const saving = editor.flush();
		type(editor, '3');
		await saving;
		expect(editor.state).toBe('waiting');
		await vi.advanceTimersByTimeAsync(1000);
		expect(sent.map(({ draft }) => draft.consentTextVersion)).toEqual(['2', '3']);
		expect(editor.state).toBe('saved');
	});

	it('comes back with what a killed page had not saved', async () => {
		const store = memory();
		const first = createEditor();
		first.keepWith(keeper(store));
		answer = () => null;
		type(first, '2');
		await vi.advanceTimersByTimeAsync(200);
		const second = createEditor();
		second.keepWith(keeper(store));
		expect(second.isRestored).toBe(true);
		expect(second.draft.consentTextVersion).toBe('2');
		answer = () => ({ state: 'saved', revision: 1, enteredBy: {} });
		await vi.advanceTimersByTimeAsync(1000);
		expect(second.state).toBe('saved');
		expect(keeper(store).read()).toBeNull();
		second.undo();
		expect(second.draft.consentTextVersion).toBe('1');
	});

	it('asks when the server has gone on since the page was killed', async () => {
		const store = memory();
		const first = createEditor();
		first.keepWith(keeper(store));
		type(first, 'mine');
		await vi.advanceTimersByTimeAsync(200);
		const theirs = { ...createPatternDraft('two-arms'), consentTextVersion: 'theirs' };
		const second = new DraftEditor({ address: '/draft', number: 1, revision: 4, draft: theirs });
		second.keepWith(keeper(store));
		expect(second.state).toBe('stale');
		expect(second.theirs?.consentTextVersion).toBe('theirs');
		expect(second.draft.consentTextVersion).toBe('mine');
	});

	it('says when the version was frozen meanwhile', async () => {
		const editor = createEditor();
		answer = () => ({ state: 'gone' });
		type(editor, '2');
		await vi.advanceTimersByTimeAsync(1000);
		expect([editor.state, editor.draft.consentTextVersion]).toEqual(['gone', '2']);
	});
});
