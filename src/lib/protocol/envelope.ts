/** One number of a block that lies outside what was approved. */
export type EnvelopeBreach = {
	limit: string;
	approved: number;
	found: number;
	unit: string;
};
