import { describe, expect, it } from 'vitest';
import { placeLabels, touches, type LabelWish } from './place-labels';

const frame = { left: 0, top: 0, width: 400, height: 300 };
const round = (cx: number, cy: number, r: number): LabelWish['outline'] =>
	Array.from({ length: 16 }, (_, k) => [
		cx + r * Math.cos((k * Math.PI) / 8),
		cy + r * Math.sin((k * Math.PI) / 8)
	]);
const wish = (key: string, cx: number, cy: number): LabelWish => ({
	key,
	width: 90,
	height: 16,
	outline: round(cx, cy, 20)
});

describe('placeLabels', () => {
	it('keeps labels inside the frame', () => {
		for (const label of placeLabels([wish('a', 20, 20), wish('b', 390, 290)], {
			frame,
			dots: []
		})) {
			expect(label.left).toBeGreaterThanOrEqual(0);
			expect(label.top).toBeGreaterThanOrEqual(0);
			expect(label.left + label.width).toBeLessThanOrEqual(400);
			expect(label.top + label.height).toBeLessThanOrEqual(300);
		}
	});

	it('keeps labels of things that lie on each other apart', () => {
		const [a, b] = placeLabels([wish('a', 200, 150), wish('b', 205, 150)], { frame, dots: [] });
		expect(a && b && touches(a, b)).toBe(false);
	});

	it('goes where no dots are', () => {
		const dots = Array.from({ length: 400 }, (_, k) => [k % 400, 100 + (k % 25)] as const);
		const [label] = placeLabels([wish('a', 200, 150)], { frame, dots });
		expect(label?.top).toBeGreaterThan(125);
	});

	it('gives the same places twice', () => {
		const wishes = [wish('a', 200, 150), wish('b', 220, 160)];
		expect(placeLabels(wishes, { frame, dots: [] })).toEqual(
			placeLabels(wishes, { frame, dots: [] })
		);
	});
});
