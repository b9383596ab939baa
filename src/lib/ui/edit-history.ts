/** A state of what is edited, what was done to reach it, and where. */
type Entry<State> = { state: State; label: string; place: string | null; atMs: number };

/** What was done: in words, and, for typing that should count as one step, at which place. */
export type Step = { label: string; place?: string | null; atMs: number };

/** Changes of one place within this time are one step. */
const mergeMs = 1000;

/**
 * Every state that something edited has been in, without limit, and the way back and forth. States must
 * not be changed once recorded; what they share is kept once.
 */
export class EditHistory<State> {
	#past: Entry<State>[] = [];
	#present: Entry<State>;
	#future: Entry<State>[] = [];

	constructor(start: State) {
		this.#present = { state: start, label: '', place: null, atMs: -Infinity };
	}

	get state(): State {
		return this.#present.state;
	}

	/** What undo would take back, in words; null when there is nothing. */
	get undoLabel(): string | null {
		return this.#past.length > 0 ? this.#present.label : null;
	}

	get redoLabel(): string | null {
		return this.#future.at(-1)?.label ?? null;
	}

	record(state: State, { label, place = null, atMs }: Step): void {
		if (state === this.#present.state) return;
		const isSame =
			place !== null &&
			place === this.#present.place &&
			atMs - this.#present.atMs < mergeMs &&
			this.#future.length === 0 &&
			this.#past.length > 0;
		if (!isSame) this.#past.push(this.#present);
		this.#future = [];
		this.#present = { state, label, place, atMs };
	}

	/** Puts in what nobody did, such as a value that the server fills in; no step of its own. */
	amend(state: State): void {
		this.#present = { ...this.#present, state };
	}

	undo(): State | null {
		const before = this.#past.pop();
		if (!before) return null;
		this.#future.push(this.#present);
		this.#present = { ...before, place: null };
		return before.state;
	}

	redo(): State | null {
		const after = this.#future.pop();
		if (!after) return null;
		this.#past.push(this.#present);
		this.#present = { ...after, place: null };
		return after.state;
	}
}
