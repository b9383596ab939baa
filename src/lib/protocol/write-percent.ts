/** A share as a percentage with every digit it carries: 0.155 is '15.5 %'. */
export function writePercent(share: number): string {
	return `${Number((share * 100).toPrecision(12))} %`;
}
