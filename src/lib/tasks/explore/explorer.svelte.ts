import { entry } from '$scheduler/linear-algebra/vector';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import { readTaskDraft, writeTaskDraft, type TaskDraft } from '../task-draft';
import type { CloudPicture, SpacePicture } from './cloud-request';
import { describeProbe } from './describe-probe';
import { openExploreClient, type ExploreClient } from './explore-client';
import type { Theme } from './map-colours';
import type { MapPicture } from './map-request';
import { clampTo, moveProbe } from './probe-steps';
import { drawScene } from './scenes/draw-scene';
import { listSecondSystems } from './second-systems';

/** How long the page must be still before the slower, finer computation is asked for, ms. */
const STILL_MS = 140;
const SEED = 20270112;

/** Everything that can be changed on the explorer's page, and what is computed from it. */
export class Explorer {
	draft = $state<TaskDraft>(writeTaskDraft(emptyOf()));
	/** The last task that could be read; stays while a field is empty or wrong. */
	record = $state.raw<TaskRecord>(emptyOf());
	axes = $state.raw<readonly [number, number]>([0, 1]);
	point = $state.raw<readonly number[]>([]);
	hovered = $state.raw<readonly number[] | null>(null);
	isDragging = $state(false);

	cloudPlace = $state.raw<readonly number[]>([]);
	cloud = $state({ trials: 60, alongSd: 2, acrossSd: 0.4 });
	second = $state('');
	region = $state({ isOn: false, alongSd: 1, acrossSd: 0.6 });
	regionPlace = $state.raw<readonly number[] | null>(null);
	shift = $state<number | null>(null);

	map = $state.raw<MapPicture | null>(null);
	cloudPicture = $state.raw<CloudPicture | null>(null);
	space = $state.raw<SpacePicture | null>(null);
	failure = $state('');
	/** Time from asking for a map to having it, ms; the last one while something was dragged. */
	lastMapMs = $state(0);

	theme = $state<Theme>('light');
	pixels = $state.raw({ width: 0, height: 0 });
	smallPixels = { width: 440, height: 380 };

	readonly reading = $derived(readTaskDraft(this.draft));
	readonly shown = $derived(this.hovered ?? this.point);
	readonly words = $derived(describeProbe(this.record, this.shown));
	readonly probeWords = $derived(describeProbe(this.record, this.point));
	readonly scene = $derived(drawScene(this.record, this.shown));
	readonly systems = $derived(listSecondSystems(this.record));
	readonly isMapped = $derived(this.record.variables.length >= 2);
	readonly window = $derived.by(() => {
		const [x, y] = this.axes.map((axis) => this.record.variables[axis]);
		return { x: [x?.min ?? 0, x?.max ?? 1], y: [y?.min ?? 0, y?.max ?? 1] } as const;
	});
	/** Variables that are held while the map is looked at. */
	readonly held = $derived(
		this.record.variables.flatMap((variable, index) =>
			this.axes.includes(index) ? [] : [{ variable, index }]
		)
	);

	#client: ExploreClient | null = null;
	#timer: ReturnType<typeof setTimeout> | undefined;
	#askedMs = 0;
	/** What the fine map was last asked for. */
	#fineKey = '';

	constructor(record: TaskRecord) {
		this.open(record);
	}

	/** Starts again with another task. */
	open(record: TaskRecord): void {
		this.draft = writeTaskDraft(record);
		this.#take(record);
		this.axes = [0, Math.min(1, record.variables.length - 1)];
	}

	/** Takes over what the form holds, once it can be read. */
	follow(): void {
		if (this.reading.ok) this.#take(this.reading.record);
	}

	#take(record: TaskRecord): void {
		const isOther =
			record.type !== this.record.type || record.variables.length !== this.point.length;
		this.record = record;
		if (isOther) {
			const origin = record.variables.map(({ origin: value }) => value);
			[this.point, this.cloudPlace] = [origin, origin];
			[this.hovered, this.regionPlace, this.cloudPicture, this.space] = [null, null, null, null];
			if (record.type !== 'linear' && record.type !== 'formula') this.axes = [0, 1];
			this.axes = [0, Math.min(1, record.variables.length - 1)];
		} else {
			this.point = this.point.map((value, i) => this.#clamp(i, value));
		}
		const systems = listSecondSystems(record);
		if (!systems.some(({ key }) => key === this.second)) this.second = systems[0]?.key ?? '';
	}

	#clamp(axis: number, value: number): number {
		const variable = this.record.variables[axis];
		return variable ? clampTo(variable, value) : value;
	}

	/** Puts the probe at a place of the map, or at a typed value. */
	probe(changes: ReadonlyMap<number, number>): void {
		this.point = this.#at(changes);
	}

	hover(changes: ReadonlyMap<number, number> | null): void {
		this.hovered = changes && this.#at(changes);
	}

	step(axis: number, steps: number): void {
		this.hovered = null;
		this.point = moveProbe(this.record, this.point, axis, steps);
	}

	#at(changes: ReadonlyMap<number, number>): number[] {
		return this.point.map((value, i) => this.#clamp(i, changes.get(i) ?? value));
	}

	/** Moves the target: new values of number fields of the task. */
	moveTarget(values: Readonly<Record<string, number>>): void {
		for (const [key, value] of Object.entries(values)) this.draft.numbers[key] = value;
		this.follow();
	}

	connect(): () => void {
		this.#client = openExploreClient({
			onMap: (picture, { quality }) => {
				this.map = picture;
				this.failure = '';
				if (quality === 'coarse' && this.isDragging)
					this.lastMapMs = performance.now() - this.#askedMs;
			},
			onCloud: (picture) => {
				this.cloudPicture = picture;
				if (this.record.variables.length === 3) this.#askSpace(picture);
			},
			onSpace: (picture) => (this.space = picture),
			onFail: (kind, detail) => (this.failure = `The ${kind} could not be computed: ${detail}.`)
		});
		return () => {
			clearTimeout(this.#timer);
			this.#client?.stop();
			this.#client = null;
		};
	}

	/** Asks for everything that depends on what is set now: the map at once, the rest when it stands still. */
	ask(): void {
		if (!this.isMapped || this.pixels.width === 0) return;
		const request = {
			...{ record: $state.snapshot(this.record), axes: this.axes, point: this.point },
			...{ window: this.window, pixels: this.pixels, theme: this.theme, shift: this.shift },
			top: this.isDragging ? (this.map?.top ?? null) : null
		};
		// Only the size on the screen or the theme is another: the fine map is still known.
		const key = JSON.stringify([request.record, this.axes, this.#heldValues(), this.shift]);
		const isKnown = key === this.#fineKey;
		this.#fineKey = '';
		this.#askedMs = performance.now();
		clearTimeout(this.#timer);
		if (isKnown) {
			this.#fineKey = key;
			this.#client?.askMap({ ...request, quality: 'fine' });
			return;
		}
		this.#client?.askMap({ ...request, quality: 'coarse' });
		this.#timer = setTimeout(() => {
			if (this.isDragging) return;
			this.#fineKey = key;
			this.#client?.askMap({ ...request, quality: 'fine', top: null });
		}, STILL_MS);
	}

	#heldValues(): number[] {
		return this.held.map(({ index }) => entry(this.point, index));
	}

	/** Asks for the cloud's numbers; the map must be there, whose lines they go along. */
	askCloud(): void {
		const { map, record, region } = this;
		if (!map || map.facts.quality !== 'fine' || this.second === '') return;
		if (!isUsable(this.cloud, region)) return;
		this.#client?.askCloud({
			...{ record, axes: this.axes, point: this.point, place: this.cloudPlace, seed: SEED },
			...$state.snapshot(this.cloud),
			second: this.second,
			region: region.isOn
				? {
						center: this.regionPlace ?? this.cloudPicture?.center ?? this.cloudPlace,
						...{ alongSd: region.alongSd, acrossSd: region.acrossSd }
					}
				: null,
			...{ lines: map.zero, theme: this.theme, pixels: this.smallPixels, top: map.top }
		});
	}

	#askSpace({ center, trials }: CloudPicture): void {
		this.#client?.askSpace({ record: this.record, center, trials });
	}

	valueAt(axis: number): number {
		return entry(this.point, axis);
	}
}

/** Whether the fields of the cloud and the region hold numbers that can be drawn; a field may be empty. */
function isUsable(
	cloud: { trials: number; alongSd: number; acrossSd: number },
	region: { isOn: boolean; alongSd: number; acrossSd: number }
): boolean {
	const isSize = (value: number | null) => value !== null && value > 0 && value <= 20;
	const isCloud = Number.isInteger(cloud.trials) && cloud.trials >= 8 && cloud.trials <= 200;
	const isSpread =
		cloud.alongSd !== null && cloud.acrossSd !== null && cloud.alongSd + cloud.acrossSd > 0;
	return (
		isCloud && isSpread && (!region.isOn || (isSize(region.alongSd) && isSize(region.acrossSd)))
	);
}

/** Stands in until a task is opened. */
function emptyOf(): TaskRecord {
	const variable = { name: 'x', unit: '', min: 0, max: 1, origin: 0, scale: 1, resolution: 0 };
	return {
		...{ type: 'linear', coef: [1], target: 0, tolerance: 1, resultUnit: '' },
		variables: [variable]
	};
}
