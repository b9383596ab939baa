import { describe, expect, it } from 'vitest';
import { cutToFrame, placeLineLabel } from './place-line-label';
import type { PixelPoint } from './place-labels';

const rising: PixelPoint[] = Array.from({ length: 41 }, (_, k) => [k * 10, 300 - k * 5]);
const options = { width: 400, height: 300, span: 60, avoid: [] };

describe('placeLineLabel', () => {
	it('writes along the line, not upside down', () => {
		const place = placeLineLabel(rising, options);
		expect(place?.angleDeg).toBeCloseTo((Math.atan2(-5, 10) * 180) / Math.PI, 6);
		expect(placeLineLabel([...rising].reverse(), options)?.angleDeg).toBeCloseTo(
			place?.angleDeg ?? 0,
			6
		);
	});

	it('keeps away from what must stay visible', () => {
		const place = placeLineLabel(rising, { ...options, avoid: [[300, 150]] });
		expect(Math.hypot((place?.x ?? 0) - 300, (place?.y ?? 0) - 150)).toBeGreaterThan(80);
	});

	it('gives nothing on a line shorter than the word', () => {
		expect(placeLineLabel(rising.slice(0, 4), options)).toBeNull();
	});
});

describe('cutToFrame', () => {
	it('gives one piece for each stay inside the frame', () => {
		const line: PixelPoint[] = [
			[-5, 10],
			[10, 10],
			[20, 10],
			[20, -5],
			[30, 10]
		];
		expect(cutToFrame(line, 100, 100)).toEqual([
			[
				[10, 10],
				[20, 10]
			],
			[[30, 10]]
		]);
	});
});
