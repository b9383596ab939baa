export type VisitTone = 'came' | 'running' | 'missed' | 'planned' | 'free';

export interface DayVisit {
	readonly key: string;
	/** Row, by its index. */
	readonly row: number;
	/** Minutes since local midnight: the visit itself. */
	readonly fromMinute: number;
	readonly toMinute: number;
	/** With set-up and clean-up. */
	readonly occupiedFromMinute?: number | undefined;
	readonly occupiedToMinute?: number | undefined;
	/** "TW-009", "free". */
	readonly label: string;
	/** "did not come", "for TW-009". */
	readonly detail?: string | undefined;
	readonly tone: VisitTone;
	readonly href?: string | undefined;
}

/** Whole hours that hold every visit and now, at least three. */
export function findHours(
	visits: readonly DayVisit[],
	nowMinute: number | null
): { from: number; to: number } {
	const minutes = visits.flatMap((visit) => [
		visit.occupiedFromMinute ?? visit.fromMinute,
		visit.occupiedToMinute ?? visit.toMinute
	]);
	if (nowMinute !== null && visits.length > 0) minutes.push(nowMinute);
	const from = Math.floor(Math.min(9 * 60, ...minutes) / 60);
	const to = Math.max(from + 3, Math.ceil(Math.max(...minutes, (from + 3) * 60) / 60));
	return { from, to };
}

/** "09:00" of a minute since midnight; minutes beyond midnight go on with the next day's clock. */
export function clockText(minute: number): string {
	const inDay = ((Math.round(minute) % 1440) + 1440) % 1440;
	const two = (value: number) => String(value).padStart(2, '0');
	return `${two(Math.floor(inDay / 60))}:${two(inDay % 60)}`;
}

export function describeVisit(visit: DayVisit, rows: readonly string[]): string {
	const time = `${clockText(visit.fromMinute)} to ${clockText(visit.toMinute)}`;
	const what = [visit.label, visit.detail].filter(Boolean).join(' ');
	return [what, rows[visit.row], time].filter(Boolean).join(', ');
}
