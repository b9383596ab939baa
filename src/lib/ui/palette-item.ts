/** A page that can be opened, or an act that can be done. */
export type PaletteItem = {
	id: string;
	label: string;
	/** Where it belongs, in a word or two. */
	group: string;
	/** Keys that do it without the palette. */
	keys?: string | undefined;
	href?: string | undefined;
	run?: (() => void) | undefined;
};
