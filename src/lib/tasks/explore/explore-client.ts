import type { CloudPicture, CloudRequest, SpacePicture, SpaceRequest } from './cloud-request';
import type { ExploreAnswer, ExploreQuestion } from './explore-worker';
import type { MapPicture, MapRequest } from './map-request';

/** What the explorer asks for, computed away from the page; each request replaces the one before it. */
export interface ExploreClient {
	askMap(request: MapRequest): void;
	askCloud(request: CloudRequest): void;
	askSpace(request: SpaceRequest): void;
	stop(): void;
}

export interface ExploreListener {
	onMap(picture: MapPicture, request: MapRequest): void;
	onCloud(picture: CloudPicture): void;
	onSpace(picture: SpacePicture): void;
	onFail(kind: ExploreQuestion['kind'], detail: string): void;
}

/** One line to a worker: at most one question under way, the newest waiting. */
function openLine(
	onAnswer: (answer: ExploreAnswer, question: ExploreQuestion) => void,
	onBroken: () => void
) {
	const worker = new Worker(new URL('./explore-worker.ts', import.meta.url), { type: 'module' });
	let [nextId, asked]: [number, ExploreQuestion | null] = [1, null];
	const waiting = new Map<ExploreQuestion['kind'], ExploreQuestion>();
	const send = (question: ExploreQuestion) => {
		asked = question;
		worker.postMessage(question);
	};
	worker.onmessage = ({ data }: MessageEvent<ExploreAnswer>) => {
		if (asked?.id !== data.id) return;
		const question = asked;
		asked = null;
		onAnswer(data, question);
		const [next] = waiting.values();
		if (!next) return;
		waiting.delete(next.kind);
		send(next);
	};
	worker.onerror = () => {
		asked = null;
		onBroken();
	};
	return {
		/** `overtakes`: the worker is told at once, so that it can give up what it is at. */
		ask(question: Omit<ExploreQuestion, 'id'>, overtakes: boolean) {
			const whole = { ...question, id: nextId++ } as ExploreQuestion;
			if (overtakes) waiting.delete(whole.kind);
			if (!asked || overtakes) send(whole);
			else waiting.set(whole.kind, whole);
		},
		stop: () => worker.terminate()
	};
}

export function openExploreClient(listener: ExploreListener): ExploreClient {
	const hear = (answer: ExploreAnswer, question: ExploreQuestion) => {
		if (!answer.ok) {
			if (answer.reason === 'failed') listener.onFail(answer.kind, answer.detail);
		} else if (answer.kind === 'map' && question.kind === 'map')
			listener.onMap(answer.picture, question.request);
		else if (answer.kind === 'cloud') listener.onCloud(answer.picture);
		else if (answer.kind === 'space') listener.onSpace(answer.picture);
	};
	// The map has a worker of its own, so that it never waits for slower numbers.
	const maps = openLine(hear, () => listener.onFail('map', 'the computation stopped'));
	const clouds = openLine(hear, () => listener.onFail('cloud', 'the computation stopped'));
	let isFineUnderWay = false;
	return {
		askMap(request) {
			maps.ask({ kind: 'map', request } as Omit<ExploreQuestion, 'id'>, isFineUnderWay);
			isFineUnderWay = request.quality === 'fine';
		},
		askCloud: (request) =>
			clouds.ask({ kind: 'cloud', request } as Omit<ExploreQuestion, 'id'>, false),
		askSpace: (request) =>
			clouds.ask({ kind: 'space', request } as Omit<ExploreQuestion, 'id'>, false),
		stop() {
			maps.stop();
			clouds.stop();
		}
	};
}
