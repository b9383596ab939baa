import type { DayPicture } from '$lib/waiting/today';

type DayVisit = DayPicture['visits'][number];
export type VisitMoment = 'came' | 'running' | 'missed' | 'planned' | 'unsaid';

/** Where a visit of today stands now. */
export function findMoment(visit: DayVisit, nowMs: number): VisitMoment {
	if (visit.state === 'no-show') return 'missed';
	if (visit.state === 'attended') return visit.endMs > nowMs ? 'running' : 'came';
	return visit.startMs > nowMs ? 'planned' : 'unsaid';
}

/** '9 visits: 2 came, 1 is running, 1 did not come, 5 still to come'. */
export function describeDay({ visits }: DayPicture, nowMs: number): string {
	if (visits.length === 0) return 'No visits today';
	const counts = new Map<VisitMoment, number>();
	for (const visit of visits) {
		const moment = findMoment(visit, nowMs);
		counts.set(moment, (counts.get(moment) ?? 0) + 1);
	}
	const words: [VisitMoment, (count: number) => string][] = [
		['came', (count) => `${count} came`],
		['running', (count) => `${count} ${count === 1 ? 'is' : 'are'} running`],
		['missed', (count) => `${count} did not come`],
		['unsaid', (count) => `${count} to be said`],
		['planned', (count) => `${count} still to come`]
	];
	const parts = words.flatMap(([moment, say]) => {
		const count = counts.get(moment);
		return count ? [say(count)] : [];
	});
	return `${visits.length === 1 ? '1 visit' : `${visits.length} visits`}: ${parts.join(', ')}`;
}
