import { expect, it } from 'vitest';
import { computePowerWithLosses } from '../power/two-sample-t.ts';
import { designWith, soundDesign } from './designs.test-data.ts';
import { estimatePlan } from './estimate-plan.ts';

const lab = { rigHoursWeekly: 80, staffHoursWeekly: 60 };
const comparison = {
	...{ peoplePerArm: 30, effectD: 0.8, alpha: 0.05, sides: 2 },
	...{ peopleLostShare: 0.1, effectLostShare: 0 }
};

it('counts people, hours of rigs and the earliest finish from what the lab has a week', () => {
	const plan = estimatePlan(designWith([['comparison'], comparison]), lab);
	// 480 trials of 8 s and five visits with 15 and 10 min around them, for 60 people.
	const hours = 60 * ((480 * 8) / 3600 + (5 * 25) / 60);
	expect(plan).toMatchObject({ people: 60, weeklyHours: 60 });
	expect(plan.rigHours).toBeCloseTo(hours, 9);
	expect(plan.weeks).toBeCloseTo(hours / 42 + 10 / 7, 9);
	expect(plan.power).toBeCloseTo(
		computePowerWithLosses(
			{ effectSize: 0.8, n1: 30, n2: 30, alpha: 0.05, sides: 2 },
			{ peopleLossShare: 0.1, effectLossShare: 0 }
		),
		12
	);
});

it('leaves open what is not known', () => {
	const open = { people: null, rigHours: null, weeks: null, power: null };
	expect(estimatePlan(soundDesign(), lab)).toMatchObject(open);
	const closed = estimatePlan(designWith([['comparison'], comparison]), {
		...{ rigHoursWeekly: 0, staffHoursWeekly: 10 }
	});
	expect(closed.weeks).toBeNull();
});
