import { describe, expect, it } from 'vitest';
import { ovalAxes } from './oval-shape';

describe('ovalAxes', () => {
	it('has no direction when the axes differ by less than 1.3', () => {
		const axes = ovalAxes({ kind: 'ellipse', ratio: 1.29, angleDeg: 40, fill: 1 });
		expect(axes).toMatchObject({ hasDirection: false, angleDeg: 0 });
		expect(axes.rx).toBe(axes.ry);
	});

	it('keeps ratio and angle of a long oval', () => {
		const axes = ovalAxes({ kind: 'ellipse', ratio: 2, angleDeg: -35, fill: 1 });
		expect(axes.rx / axes.ry).toBeCloseTo(2, 12);
		expect(axes.angleDeg).toBe(-35);
	});

	it.each([0, 30, 45, 90, 135])('stays inside the frame at %s degrees', (angleDeg) => {
		const { rx, ry } = ovalAxes({ kind: 'ellipse', ratio: 1.5, angleDeg, fill: 1 });
		const angle = (angleDeg * Math.PI) / 180;
		expect(Math.hypot(rx * Math.sin(angle), ry * Math.cos(angle))).toBeLessThanOrEqual(8 + 1e-9);
		expect(Math.hypot(rx * Math.cos(angle), ry * Math.sin(angle))).toBeLessThanOrEqual(13 + 1e-9);
	});

	it('draws every blinded oval alike', () => {
		expect(ovalAxes({ kind: 'plain' })).toEqual(ovalAxes({ kind: 'plain', filled: true }));
	});
});
