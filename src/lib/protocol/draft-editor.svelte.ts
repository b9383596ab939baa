import { untrack } from 'svelte';
import { EditHistory } from '../ui/edit-history';
import { findChangedPlaces } from './find-changed-places';
import { writeDraftText, type DraftKeeper } from './kept-draft';
import { mergeDrafts } from './merge-drafts';
import { createLiveDraft, putSnapshot, takeSnapshot } from './live-draft.svelte';
import type { ProtocolDraft } from './protocol-draft';
import { requestSave, type SaveDraftReply } from './save-draft-request';

type Start = { address: string; number: number; revision: number; draft: ProtocolDraft };

/** saved: the server has it; waiting: it will be sent; stale: somebody else saved meanwhile. */
type SaveState = 'saved' | 'waiting' | 'saving' | 'offline' | 'stale' | 'gone' | 'refused';

const quietMs = 900;
/** Until a change is kept in the browser, and until it is checked. */
const restMs = 120;
const retryMs = [2_000, 4_000, 8_000, 15_000];

/**
 * The draft in the page: what is typed, whether the server has it, and the way back and forth. Changes
 * are kept in the browser at once and saved once typing rests; what cannot be saved stays and is said.
 */
export class DraftEditor {
	/** Fields are bound to it; visits and arms change by `apply` alone. */
	readonly draft: ProtocolDraft;
	readonly number: number;
	state: SaveState = $state('saved');
	faults: string[] = $state([]);
	/** What somebody else saved, while `state` is stale. */
	theirs: ProtocolDraft | null = $state.raw(null);
	/** What undo takes back and redo brings again, in words; null when there is nothing. */
	undoLabel: string | null = $state(null);
	redoLabel: string | null = $state(null);
	/** Whether something was brought back that an earlier page had not saved. */
	isRestored = $state(false);
	revision = $state(0);
	/** The draft once typing rests for a moment: what is worth checking as a whole. */
	settled: ProtocolDraft = $state.raw() as ProtocolDraft;

	readonly #address: string;
	readonly #history: EditHistory<ProtocolDraft>;
	#keeper: DraftKeeper | null = null;
	#saved: ProtocolDraft;
	#theirRevision = 0;
	#timer: ReturnType<typeof setTimeout> | undefined;
	#restTimer: ReturnType<typeof setTimeout> | undefined;
	#keepTimer: ReturnType<typeof setTimeout> | undefined;
	#failures = 0;
	#running: Promise<void> | null = null;

	constructor({ address, number, revision, draft }: Start) {
		this.draft = createLiveDraft(draft);
		this.number = number;
		this.revision = revision;
		this.#address = address;
		this.#saved = draft;
		this.settled = draft;
		this.#history = new EditHistory(draft);
	}

	/** The draft as it was last noticed; it never changes. */
	get snapshot(): ProtocolDraft {
		return this.#history.state;
	}

	/** Called after each change of a field: what was typed becomes a step of the history. */
	notice(label = 'what was typed'): void {
		const before = this.#history.state;
		const now = takeSnapshot(this.draft, before);
		if (now === before) return;
		const places = findChangedPlaces(before, now);
		const place = places && `${label}: ${places.join(' ')}`;
		this.#history.record(now, { label, place, atMs: performance.now() });
		untrack(() => this.#react());
	}

	/** Does one act on the draft; `label` says what, for undo. False when nothing changed. */
	apply(edit: (draft: ProtocolDraft) => ProtocolDraft, label?: string): boolean {
		this.notice();
		const before = this.#history.state;
		const next = edit(before);
		if (next === before) return false;
		putSnapshot(this.draft, before, next);
		this.notice(label);
		return true;
	}

	undo(): void {
		this.notice();
		this.#goTo((history) => history.undo());
	}

	redo(): void {
		this.notice();
		this.#goTo((history) => history.redo());
	}

	/** From now on what is not saved is kept in this browser, and what an earlier page kept comes back. */
	keepWith(keeper: DraftKeeper): void {
		this.#keeper = keeper;
		const kept = keeper.read();
		if (!kept) return;
		if (writeDraftText(kept.draft) === writeDraftText(this.#saved)) return keeper.forget();
		const current = this.#history.state;
		this.isRestored = this.apply(() => kept.draft, 'what was brought back');
		if (kept.revision === this.revision) return;
		this.#theirRevision = this.revision;
		this.theirs = current;
		this.state = 'stale';
	}

	/** Saves now; resolves when the server has answered. */
	async flush({ keepalive = false } = {}): Promise<void> {
		clearTimeout(this.#timer);
		while (this.#running) await this.#running;
		this.notice();
		if (this.#isStuck() || this.#history.state === this.#saved) return;
		this.#running = this.#save(keepalive).finally(() => {
			this.#running = null;
			if (this.state === 'saved') this.#react();
		});
		await this.#running;
	}

	/** What I and whoever saved meanwhile made of the draft, together; null while nobody did. */
	merge(): { draft: ProtocolDraft; clashes: number } | null {
		if (!this.theirs) return null;
		return mergeDrafts({ base: this.#saved, theirs: this.theirs, mine: this.#history.state });
	}

	/** Ends a stale state: theirs replaces mine (undo brings mine back), mine is saved over theirs, or both. */
	settle(choice: 'mine' | 'theirs' | 'both'): void {
		const theirs = this.theirs;
		const merged = this.merge();
		if (!theirs || !merged) return;
		this.#saved = theirs;
		this.theirs = null;
		this.revision = this.#theirRevision;
		this.state = 'waiting';
		if (choice === 'theirs') this.apply(() => theirs, 'taking what somebody else saved');
		if (choice === 'both') this.apply(() => merged.draft, 'putting both together');
		this.#react();
	}

	/** Takes back what was brought back; redo brings it again. */
	dropRestored(): void {
		this.isRestored = false;
		this.undo();
	}

	/** Keeps in the browser what the server does not have. */
	keepNow(): void {
		clearTimeout(this.#keepTimer);
		this.#keepTimer = undefined;
		const { state } = this.#history;
		if (state === this.#saved) this.#keeper?.forget();
		else this.#keeper?.keep(this.revision, writeDraftText(state));
	}

	stop(): void {
		clearTimeout(this.#timer);
		clearTimeout(this.#restTimer);
		this.keepNow();
		void this.flush({ keepalive: true });
	}

	#goTo(step: (history: EditHistory<ProtocolDraft>) => ProtocolDraft | null): void {
		const before = this.#history.state;
		const next = step(this.#history);
		if (!next) return;
		putSnapshot(this.draft, before, next);
		this.#react();
	}

	/** Nothing is sent before the person has chosen what to do. */
	#isStuck(): boolean {
		return this.state === 'stale' || this.state === 'gone';
	}

	#react(): void {
		this.undoLabel = this.#history.undoLabel;
		this.redoLabel = this.#history.redoLabel;
		const isSaved = this.#history.state === this.#saved;
		if (isSaved) this.keepNow();
		else this.#keepTimer ??= setTimeout(() => this.keepNow(), restMs);
		clearTimeout(this.#restTimer);
		this.#restTimer = setTimeout(() => (this.settled = this.#history.state), restMs);
		if (this.#isStuck()) return;
		if (isSaved) clearTimeout(this.#timer);
		if (this.#running) return;
		this.state = isSaved ? 'saved' : 'waiting';
		if (!isSaved) this.#schedule(quietMs);
	}

	#schedule(ms: number): void {
		clearTimeout(this.#timer);
		this.#timer = setTimeout(() => void this.flush(), ms);
	}

	async #save(keepalive: boolean): Promise<void> {
		const draft = this.#history.state;
		this.state = 'saving';
		const { number, revision } = this;
		const reply = await requestSave(this.#address, { number, revision, draft }, { keepalive });
		if (reply) return this.#hear(draft, reply);
		this.state = 'offline';
		this.#schedule(retryMs[Math.min(this.#failures++, retryMs.length - 1)] ?? quietMs);
	}

	#hear(sent: ProtocolDraft, reply: SaveDraftReply): void {
		this.#failures = 0;
		if (reply.state === 'saved') return this.#accept(sent, reply);
		if (reply.state === 'stale') {
			this.#theirRevision = reply.revision;
			this.theirs = reply.draft;
		}
		this.faults = reply.state === 'refused' ? reply.faults : [];
		this.state = reply.state;
	}

	/** The server fills in who entered an assumption; that is no step of its own. */
	#accept(sent: ProtocolDraft, reply: { revision: number; enteredBy: Record<string, string> }) {
		this.notice();
		this.revision = reply.revision;
		const isStill = this.#history.state === sent;
		this.#saved = this.#nameAuthors(sent, reply.enteredBy);
		const before = this.#history.state;
		const now = isStill ? this.#saved : this.#nameAuthors(before, reply.enteredBy);
		putSnapshot(this.draft, before, now);
		this.#history.amend(now);
		this.state = 'saved';
	}

	#nameAuthors(draft: ProtocolDraft, enteredBy: Record<string, string>): ProtocolDraft {
		const { comparison } = draft;
		if (JSON.stringify(comparison.enteredBy) === JSON.stringify(enteredBy)) return draft;
		return { ...draft, comparison: { ...comparison, enteredBy } };
	}
}
