/** One line of the readable protocol; `key` names the same line in every version. */
export type ProtocolLine = {
	key: string;
	term: string;
	text: string;
	/** Paths of the values of which the line tells; a change of any of them changes its words. */
	tells: readonly string[];
};
export type ProtocolPart = { key: string; title: string; lines: ProtocolLine[] };

/** Whom a text is for: `withRule` is who may know how blocks are chosen, and of which kind they are. */
export type Reader = { withRule: boolean };

/** `steps` of one place, such as 'limits.trialsPerVisit'. */
export function pathsIn(place: string, steps: readonly string[]): string[] {
	return steps.map((step) => `${place}.${step}`);
}
