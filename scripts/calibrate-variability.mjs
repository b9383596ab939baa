#!/usr/bin/env node
// Writes the tables of ellipsoids, intervals and robust estimates into scheduler/CALIBRATION.md, all of
// them or those named: `node scripts/calibrate-variability.mjs intervals`. About two minutes; seeded,
// so the same numbers come out on every computer.
import { loadModule } from './calibration/load-module.mjs';
import { writeSection } from './calibration/write-section.mjs';

const TABLES = {
	async ellipsoids() {
		const { calibrateEllipsoids } = await loadModule('scheduler/calibration/ellipsoid-coverage.ts');
		writeSection('Ellipsoids', [
			'Share of 500 samples of a normal population in which each ellipsoid holds what it says, ± one',
			'standard error. The ellipsoids assume trials that do not resemble their neighbours: with lag-1',
			'correlation the ellipsoid of the mean is too small.\n',
			calibrateEllipsoids(500)
		]);
	},
	async intervals() {
		const { calibrateIntervals } = await loadModule('scheduler/calibration/interval-coverage.ts');
		writeSection('Block-bootstrap intervals', [
			'Share of 200 samples in which the 95 % interval (runs of five, percentiles of 200 replicates)',
			'holds the value of the population, ± one standard error. Read it with 20 trials as an interval of',
			'85 to 90 %, with 60 trials as one of about 90 %.\n',
			calibrateIntervals(200)
		]);
	},
	async robust() {
		const { calibrateRobust } = await loadModule('scheduler/calibration/robust-estimates.ts');
		writeSection('Robust estimates', [
			'Area of the cloud against the true area, and share of trials flagged at the .99 quantile; 200',
			'samples a row, strays 8 SD away on one side.\n',
			calibrateRobust(200)
		]);
	}
};

const names = process.argv.slice(2);
for (const name of names.length > 0 ? names : Object.keys(TABLES)) await TABLES[name]();
