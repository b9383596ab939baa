import type { CloudPicture, CloudRequest, SpacePicture, SpaceRequest } from './cloud-request';
import { computeCloud } from './compute-cloud';
import { computeResults, drawMap } from './compute-map';
import { computeSpace } from './compute-space';
import type { MapPicture, MapRequest } from './map-request';

/** A question to the worker. Of each kind only the newest is answered. */
export type ExploreQuestion =
	| { id: number; kind: 'map'; request: MapRequest }
	| { id: number; kind: 'cloud'; request: CloudRequest }
	| { id: number; kind: 'space'; request: SpaceRequest };

export type ExploreAnswer =
	| { id: number; kind: 'map'; ok: true; picture: MapPicture }
	| { id: number; kind: 'cloud'; ok: true; picture: CloudPicture }
	| { id: number; kind: 'space'; ok: true; picture: SpacePicture }
	| {
			id: number;
			kind: ExploreQuestion['kind'];
			ok: false;
			reason: 'overtaken' | 'failed';
			detail: string;
	  };

/** How long a map is computed before newer questions are looked for, ms. */
const SLICE_MS = 20;

const newest = new Map<ExploreQuestion['kind'], number>();

self.onmessage = ({ data }: MessageEvent<ExploreQuestion>) => {
	newest.set(data.kind, data.id);
	void answer(data);
};

async function answer(question: ExploreQuestion): Promise<void> {
	const { id, kind } = question;
	try {
		if (question.kind === 'map') await answerMap(id, question.request);
		else if (question.kind === 'cloud') {
			const picture = computeCloud(question.request);
			const images = [picture.first, picture.second].flatMap((panel) =>
				panel ? [panel.image.pixels.buffer] : []
			);
			post({ id, kind: 'cloud', ok: true, picture }, images);
		} else post({ id, kind: 'space', ok: true, picture: computeSpace(question.request) }, []);
	} catch (error) {
		const detail = error instanceof Error ? error.message : String(error);
		post({ id, kind, ok: false, reason: 'failed', detail }, []);
	}
}

async function answerMap(id: number, request: MapRequest): Promise<void> {
	const started = performance.now();
	let sliceStart = started;
	const isStillWanted = async () => {
		if (performance.now() - sliceStart < SLICE_MS) return true;
		await new Promise((resolve) => setTimeout(resolve));
		sliceStart = performance.now();
		return newest.get('map') === id;
	};
	const map = await computeResults(request, isStillWanted);
	if (!map) return post({ id, kind: 'map', ok: false, reason: 'overtaken', detail: '' }, []);
	const picture = drawMap(map, request, started);
	post({ id, kind: 'map', ok: true, picture }, [picture.image.pixels.buffer]);
}

function post(answer: ExploreAnswer, transfer: Transferable[]): void {
	self.postMessage(answer, { transfer });
}
