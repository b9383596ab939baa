/** Whole days from one local date to another ('YYYY-MM-DD'); negative when the second is earlier. */
export function daysBetween(from: string, to: string): number {
	return Math.round((Date.parse(to) - Date.parse(from)) / 86_400_000);
}
