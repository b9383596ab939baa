import { z } from 'zod';
import { protocolDraftSchema, type ProtocolDraft } from './protocol-draft';

const keptSchema = z.object({
	/** The revision that the server had when this was typed. */
	revision: z.number().int(),
	draft: protocolDraftSchema
});

export type KeptDraft = z.infer<typeof keptSchema>;

/** What of the browser's own store is needed here. */
type Store = Pick<Storage, 'getItem' | 'setItem' | 'removeItem'>;

/**
 * What was typed and not saved yet, kept in this browser until the server has it: a tab that is killed
 * loses nothing. `key` names the study's address, the draft and the person.
 */
export class DraftKeeper {
	readonly #store: Store;
	readonly #key: string;

	constructor(
		store: Store,
		{ address, number, who }: { address: string; number: number; who: string }
	) {
		this.#store = store;
		this.#key = `ovalry-draft ${address} ${number} ${who}`;
	}

	/** False when the browser has no room or keeps nothing; the page goes on without. */
	keep(revision: number, draftText: string): boolean {
		try {
			this.#store.setItem(this.#key, `{"revision":${revision},"draft":${draftText}}`);
			return true;
		} catch {
			return false;
		}
	}

	/** Null when nothing is kept, or what is kept cannot be read any more. */
	read(): KeptDraft | null {
		try {
			const parsed = keptSchema.safeParse(JSON.parse(this.#store.getItem(this.#key) ?? 'null'));
			return parsed.success ? parsed.data : null;
		} catch {
			return null;
		}
	}

	forget(): void {
		try {
			this.#store.removeItem(this.#key);
		} catch {
			// A browser that keeps nothing has nothing to forget.
		}
	}
}

/** A draft as text, with the text of each visit made once for as long as the visit stays the same. */
export function writeDraftText(draft: ProtocolDraft): string {
	const parts = Object.entries(draft).map(([key, part]) => {
		const text =
			key === 'visits' ? `[${draft.visits.map(textOf).join(',')}]` : JSON.stringify(part);
		return `${JSON.stringify(key)}:${text}`;
	});
	return `{${parts.join(',')}}`;
}

const texts = new WeakMap<object, string>();

function textOf(part: object): string {
	const known = texts.get(part);
	if (known !== undefined) return known;
	const text = JSON.stringify(part);
	texts.set(part, text);
	return text;
}
