import type { ProtocolDraft } from './protocol-draft';
import { requestSave } from './save-draft-request';

type Start = { address: string; number: number; revision: number; draft: ProtocolDraft };

/** saved: the server has it; waiting: it will be sent; stale: somebody else saved meanwhile. */
type SaveState = 'saved' | 'waiting' | 'saving' | 'offline' | 'stale' | 'gone' | 'refused';

const quietMs = 900;
const retryMs = [2_000, 4_000, 8_000, 15_000];
const historyLimit = 50;

/**
 * The draft in the page: what is typed, whether the server has it, and the way back. Changes are
 * saved once typing rests; what cannot be saved stays here and is said.
 */
export class DraftEditor {
	draft: ProtocolDraft = $state() as ProtocolDraft;
	state: SaveState = $state('saved');
	faults: string[] = $state([]);
	/** What somebody else saved, while `state` is stale. */
	theirs: ProtocolDraft | null = $state(null);
	canUndo = $state(false);

	readonly number: number;
	revision = $state(0);
	readonly #address: string;
	#savedText: string;
	#theirRevision = 0;
	#history: string[] = [];
	#timer: ReturnType<typeof setTimeout> | undefined;
	#failures = 0;
	#running: Promise<void> | null = null;

	constructor({ address, number, revision, draft }: Start) {
		this.draft = draft;
		this.number = number;
		this.revision = revision;
		this.#address = address;
		this.#savedText = JSON.stringify(draft);
	}

	/** Called with the draft's text after each change. */
	notice(text: string): void {
		if (this.#isStuck()) return;
		if (text === this.#savedText) {
			if (!this.#running) this.state = 'saved';
			return;
		}
		this.state = 'waiting';
		this.#schedule(quietMs);
	}

	/** Saves now; resolves when the server has answered. */
	async flush({ keepalive = false } = {}): Promise<void> {
		clearTimeout(this.#timer);
		while (this.#running) await this.#running;
		if (this.#isStuck() || JSON.stringify(this.draft) === this.#savedText) return;
		this.#running = this.#save(keepalive).finally(() => (this.#running = null));
		await this.#running;
	}

	/** Goes back to what was saved before the last change. */
	undo(): void {
		const current = JSON.stringify(this.draft);
		let text = this.#history.pop();
		while (text === current) text = this.#history.pop();
		if (text !== undefined) this.draft = JSON.parse(text) as ProtocolDraft;
		this.canUndo = this.#history.length > 0;
	}

	/** Ends a stale state: theirs replaces mine (undo brings mine back), or mine is saved over theirs. */
	settle(choice: 'mine' | 'theirs'): void {
		const theirs = this.theirs;
		if (!theirs) return;
		this.#savedText = JSON.stringify(theirs);
		this.theirs = null;
		this.revision = this.#theirRevision;
		if (choice === 'theirs') {
			this.#remember(JSON.stringify(this.draft));
			this.draft = theirs;
			this.state = 'saved';
		} else {
			this.#remember(this.#savedText);
			this.state = 'waiting';
			this.#schedule(0);
		}
	}

	stop(): void {
		clearTimeout(this.#timer);
		void this.flush({ keepalive: true });
	}

	/** Nothing is sent before the person has chosen what to do. */
	#isStuck(): boolean {
		return this.state === 'stale' || this.state === 'gone';
	}

	#schedule(ms: number): void {
		clearTimeout(this.#timer);
		this.#timer = setTimeout(() => void this.flush(), ms);
	}

	#remember(text: string): void {
		if (this.#history.at(-1) !== text) this.#history.push(text);
		if (this.#history.length > historyLimit) this.#history.shift();
		this.canUndo = true;
	}

	async #save(keepalive: boolean): Promise<void> {
		const draft = $state.snapshot(this.draft) as ProtocolDraft;
		const text = JSON.stringify(draft);
		this.state = 'saving';
		const { number, revision } = this;
		const reply = await requestSave(this.#address, { number, revision, draft }, { keepalive });
		if (!reply) {
			this.state = 'offline';
			this.#schedule(retryMs[Math.min(this.#failures++, retryMs.length - 1)] ?? quietMs);
			return;
		}
		this.#failures = 0;
		if (reply.state === 'saved') this.#accept(text, reply);
		else if (reply.state === 'stale') {
			this.#theirRevision = reply.revision;
			this.theirs = reply.draft;
			this.state = 'stale';
		} else {
			this.faults = reply.state === 'refused' ? reply.faults : [];
			this.state = reply.state;
		}
	}

	#accept(text: string, reply: { revision: number; enteredBy: Record<string, string> }): void {
		this.#remember(this.#savedText);
		this.revision = reply.revision;
		const saved = JSON.parse(text) as ProtocolDraft;
		saved.comparison.enteredBy = reply.enteredBy;
		this.draft.comparison.enteredBy = reply.enteredBy;
		this.#savedText = JSON.stringify(saved);
		this.state = 'saved';
		this.notice(JSON.stringify(this.draft));
	}
}
