import type { Calendar, EventDropArg, EventMountArg } from '@fullcalendar/core';
import { fromGridTime } from '$lib/bookings/grid-clock';
import type { Week } from '$lib/bookings/week';
import { formatDay } from '$lib/time/format-instant';
import { startOfLocalDate } from '$lib/time/start-of-local-day';
import { wallClock } from '$lib/time/wall-clock';
import { drawEvent } from './draw-event';
import type { GridEvent, GridProps } from './grid-events';

export type GridActs = {
	week(): Week;
	/** A visit was chosen, by click or Enter. */
	onchoose(bookingId: string): void;
	ondrag(bookingId: string): void;
	ondrop(bookingId: string, place: { startMs: number; rigId: string }): void;
	/** An allowed stretch was pressed at a time. */
	onpress(place: { startMs: number; rigId: string }): void;
};

/** The week's grid on FullCalendar, with lanes for the rigs and no toolbar of its own. */
export async function createWeekCalendar(element: HTMLElement, acts: GridActs): Promise<Calendar> {
	const [{ Calendar }, { default: timeGrid }, { default: interaction }] = await Promise.all([
		import('@fullcalendar/core'),
		import('@fullcalendar/timegrid'),
		import('@fullcalendar/interaction')
	]);
	const { week } = acts;
	let dropped = false;
	const calendar = new Calendar(element, {
		plugins: [timeGrid, interaction],
		initialView: 'timeGridWeek',
		...viewOf(week()),
		headerToolbar: false,
		timeZone: 'UTC',
		now: () => wallClock(week().nowMs, week().zone),
		firstDay: 1,
		allDaySlot: false,
		height: 'auto',
		slotDuration: '00:30',
		snapDuration: '00:15',
		slotLabelInterval: '01:00',
		slotLabelFormat: { hour: '2-digit', minute: '2-digit', hour12: false },
		nowIndicator: true,
		editable: true,
		eventDurationEditable: false,
		eventInteractive: true,
		slotEventOverlap: true,
		dragRevertDuration: 0,
		longPressDelay: 350,
		dayHeaderContent: ({ date }) => ({ domNodes: drawDayHeader(date, week()) }),
		eventContent: ({ event }) => ({ domNodes: drawEvent(event.extendedProps as GridProps) }),
		eventDidMount: (info) => mountEvent(info, week()),
		eventClick: ({ event, jsEvent }) => pressEvent(event.extendedProps as GridProps, jsEvent, acts),
		eventDragStart: ({ event }) => {
			dropped = false;
			const { bookingId } = event.extendedProps as GridProps;
			if (bookingId) acts.ondrag(bookingId);
		},
		eventDragStop: ({ event, jsEvent }) => {
			// A drop on another rig at the same time is no change for the library.
			setTimeout(() => {
				const props = event.extendedProps as GridProps;
				const rigId = rigAt(jsEvent, week());
				if (dropped || !rigId || rigId === props.rigId || !props.bookingId) return;
				acts.ondrop(props.bookingId, { startMs: props.fromMs, rigId });
			});
		},
		eventDrop: (info) => {
			dropped = true;
			readDrop(info, acts);
			info.revert();
		}
	});
	calendar.render();
	return calendar;
}

/** Options that change with the week. */
export function viewOf(week: Week) {
	const shown = new Set(week.days.map(({ date }) => new Date(`${date}T00:00Z`).getUTCDay()));
	return {
		initialDate: week.monday,
		hiddenDays: [0, 1, 2, 3, 4, 5, 6].filter((day) => !shown.has(day)),
		slotMinTime: clockText(week.fromMinute),
		slotMaxTime: clockText(week.toMinute)
	};
}

function clockText(minute: number): string {
	const two = (value: number) => String(value).padStart(2, '0');
	return `${two(Math.floor(minute / 60))}:${two(minute % 60)}:00`;
}

/** Takes away what is gone and adds what is new; what is unchanged keeps its element and its focus. */
export function showEvents(calendar: Calendar, events: readonly GridEvent[]): void {
	const wanted = new Map(events.map((event) => [event.id, event]));
	calendar.batchRendering(() => {
		for (const shown of calendar.getEvents()) {
			if (!wanted.delete(shown.id)) shown.remove();
		}
		for (const event of wanted.values()) calendar.addEvent(event);
	});
}

function drawDayHeader(date: Date, week: Week): Node[] {
	const day = date.toISOString().slice(0, 10);
	const [weekday = '', number = '', month = ''] = formatDay(
		startOfLocalDate(day, week.zone),
		week.zone
	).split(' ');
	const head = document.createElement('span');
	head.className = 'day-name';
	head.textContent = `${weekday} ${number} ${month}`;
	const closed = week.days.find((one) => one.date === day)?.closed;
	const lanes = document.createElement('span');
	lanes.className = 'lane-names';
	const names = closed ? [`closed: ${closed}`] : week.rigs.map(({ name }) => name);
	for (const name of names) {
		const lane = document.createElement('span');
		lane.textContent = name;
		lanes.append(lane);
	}
	return [head, lanes];
}

function mountEvent({ el, event, isMirror }: EventMountArg, week: Week): void {
	const { rigId, words, kind, bookingId } = event.extendedProps as GridProps;
	setLane(el, rigId, week);
	if (kind !== 'visit' && kind !== 'candidate') {
		el.setAttribute('aria-hidden', 'true');
		return;
	}
	el.setAttribute('role', 'button');
	el.setAttribute('aria-label', words);
	if (bookingId) el.dataset.booking = bookingId;
	if (isMirror) followPointer(el, week);
}

function setLane(element: HTMLElement, rigId: string, { rigs }: Week): void {
	const index = Math.max(
		0,
		rigs.findIndex(({ id }) => id === rigId)
	);
	const harness = element.closest<HTMLElement>(
		'.fc-timegrid-event-harness, .fc-timegrid-bg-harness'
	);
	harness?.style.setProperty('--lane-start', `${(index / rigs.length) * 100}%`);
	harness?.style.setProperty('--lane-end', `${(1 - (index + 1) / rigs.length) * 100}%`);
}

/** While a visit is dragged, its picture stays in the lane under the pointer. */
function followPointer(element: HTMLElement, week: Week): void {
	const follow = (event: PointerEvent) => {
		if (!element.isConnected) return void window.removeEventListener('pointermove', follow);
		const rigId = rigAt(event, week);
		if (rigId) setLane(element, rigId, week);
	};
	window.addEventListener('pointermove', follow);
}

/** The rig whose lane is under the pointer. */
function rigAt(event: Event, { rigs }: Week): string | null {
	const point = pointOf(event);
	if (!point) return null;
	const column = document
		.elementsFromPoint(point.clientX, point.clientY)
		.map((element) => element.closest('.fc-timegrid-col[data-date]'))
		.find((found) => found !== null);
	if (!column) return null;
	const { left, width } = column.getBoundingClientRect();
	const index = Math.floor(((point.clientX - left) / width) * rigs.length);
	return rigs[Math.min(rigs.length - 1, Math.max(0, index))]?.id ?? null;
}

function pointOf(event: Event): { clientX: number; clientY: number } | null {
	if (event instanceof MouseEvent) return event;
	return 'changedTouches' in event ? ((event as TouchEvent).changedTouches[0] ?? null) : null;
}

function readDrop({ event, jsEvent }: EventDropArg, acts: GridActs): void {
	const { bookingId, rigId, setupShare } = event.extendedProps as GridProps;
	const { start, end } = event;
	if (!bookingId || !start || !end) return;
	const setupMs = Math.round(setupShare * (end.getTime() - start.getTime()));
	const week = acts.week();
	const startMs = fromGridTime(new Date(start.getTime() + setupMs), week.zone);
	if (startMs === null) return;
	acts.ondrop(bookingId, { startMs, rigId: rigAt(jsEvent, week) ?? rigId });
}

function pressEvent(props: GridProps, jsEvent: MouseEvent, acts: GridActs): void {
	if (props.kind === 'visit' && props.bookingId) acts.onchoose(props.bookingId);
	if (props.kind === 'allowed') acts.onpress({ startMs: props.fromMs, rigId: props.rigId });
	jsEvent.preventDefault();
}
