import { describe, expect, it } from 'vitest';
import {
	computePowerPicture,
	findPeopleNeeded,
	listPowerRows,
	showPower,
	type PowerAssumptions
} from './power-report';

const plan: PowerAssumptions = {
	peoplePerArm: 30,
	effectD: 0.8,
	alpha: 0.05,
	sides: 2,
	peopleLostShare: 0.1,
	effectLostShare: 0.15
};

describe('power rows', () => {
	it('equal the planning table of 30 an arm at d = .8 (SciPy 1.10 nct)', () => {
		const rows = listPowerRows(plan).map(({ name, power, toll }) => [
			name,
			showPower(power),
			toll === null ? null : showPower(toll)
		]);
		expect(rows).toEqual([
			['as planned', '.861', null],
			['10 % of people lost', '.822', '-.039'],
			['15 % of the effect lost', '.736', '-.126'],
			['both', '.689', '-.173'],
			['no effect at all', '.050', null]
		]);
	});

	it('have no power where the losses leave fewer than two people', () => {
		const rows = listPowerRows({ ...plan, peoplePerArm: 2, peopleLostShare: 0.5 });
		expect(rows.map(({ power }) => power === null)).toEqual([false, true, false, true, false]);
	});
});

describe('the power picture', () => {
	it('holds the plan, rises, and reaches past the people needed', () => {
		const { points, tableAt } = computePowerPicture(plan);
		expect(tableAt).toContain(30);
		expect(points.find(({ n }) => n === 30)?.power).toBeCloseTo(0.8614, 4);
		const powers = points.map(({ power }) => power);
		expect(powers).toEqual([...powers].sort((a, b) => a - b));
		expect(points.at(-1)?.n).toBeGreaterThanOrEqual(40);
	});

	it.each([2, 5, 300, 5000])('can be drawn for %d people an arm', (peoplePerArm) => {
		const { points, tableAt } = computePowerPicture({ ...plan, peoplePerArm, effectD: 0.05 });
		expect(points.length).toBeLessThan(70);
		expect(tableAt).toContain(peoplePerArm);
		expect(tableAt.length).toBeLessThan(13);
	});
});

describe('people needed for a power of .80', () => {
	it('are 26 an arm at d = .8, and 39 after both losses', () => {
		expect(findPeopleNeeded(plan)).toEqual({ planned: 26, withLosses: 39 });
	});
});
