import { createContext } from 'svelte';
import type { PaletteItem } from '../ui/palette-item';

/** What the page that is open can do, for the palette of the whole application. */
export class PageActs {
	#offers: { list: () => readonly PaletteItem[] }[] = $state.raw([]);

	get items(): PaletteItem[] {
		return this.#offers.flatMap(({ list }) => [...list()]);
	}

	/** Offers acts for as long as a page stands; gives what takes them back. */
	offer(list: () => readonly PaletteItem[]): () => void {
		const offer = { list };
		this.#offers = [...this.#offers, offer];
		return () => (this.#offers = this.#offers.filter((one) => one !== offer));
	}
}

export const [readPageActs, providePageActs] = createContext<PageActs>();
