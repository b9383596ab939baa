import { describe, expect, it } from 'vitest';
import { computePowerCurve } from './power-curve.ts';
import { writePowerScript } from './r-script.ts';

const DESIGN = { effectSize: 0.8, n1: 30, n2: 30, alpha: 0.05, sides: 2 } as const;
const LOSSES = { peopleLossShare: 0.1, effectLossShare: 0.15 };

describe('the R script', () => {
	const curve = computePowerCurve({ ...DESIGN, losses: LOSSES, ns: [2, 8, 30] });
	const script = writePowerScript({
		title: 'Version 5\nunlink("x")\u2028q()',
		reference: 'hash cf87758d',
		design: DESIGN,
		losses: LOSSES,
		curve
	});

	it('states every assumption and the values it checks', () => {
		expect(script).toContain('d <- 0.8');
		expect(script).toContain('people_lost <- 0.1');
		expect(script).toMatch(/same\("as planned", .*, 0\.8614\d+\)/);
		expect(script).toMatch(/same\("both", .*, 0\.6887\d+\)/);
		expect(script).toContain('power.t.test(n = n1, delta = d, sd = 1');
		expect(script).toContain('n <- c(2, 8, 30)');
		// Two people a group are fewer than two after losses.
		expect(script).toContain('n <- c(8, 30)');
	});

	it('lets no title begin a line of code', () => {
		const lines = script.split('\n');
		expect(lines[0]).toBe('# Version 5 unlink("x") q()');
		expect(lines[1]).toBe('# hash cf87758d');
	});

	it('leaves power.t.test out where groups differ', () => {
		const design = { ...DESIGN, n2: 20 };
		const text = writePowerScript({
			title: 't',
			reference: 'r',
			design,
			losses: LOSSES,
			curve: []
		});
		expect(text).not.toContain('power.t.test(');
	});
});
