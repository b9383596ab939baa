import { bench, describe } from 'vitest';
import { diagonal } from '../../scheduler/linear-algebra/matrix.ts';
import { createTask } from '../../scheduler/tasks/create-task.ts';
import { projectToManifold } from '../../scheduler/tasks/project-to-manifold.ts';
import { createScaledTask } from '../../scheduler/tasks/scaled-task.ts';
import { taskRecordSchema } from '../../scheduler/tasks/task-record.ts';
import { traceManifold } from '../../scheduler/tasks/trace-manifold.ts';
import { traceSurface } from '../../scheduler/tasks/trace-surface.ts';

const variable = (name: string, min: number, max: number, origin: number, scale: number) => ({
	...{ name, unit: '', min, max, origin, scale }
});
const throwing = [variable('v', 3, 12, 6.8, 0.25), variable('theta_deg', 5, 75, 35, 3)];

const RECORDS = [
	{ type: 'tethered-ball' },
	{ type: 'paddle-bounce' },
	{ type: 'projectile', h: 1.6, D: 5, H: 1.2, g: 9.81, tolerance: 0.25, variables: throwing },
	{ type: 'throw-height' },
	{ type: 'throw-azimuth' },
	{ type: 'puck-push' },
	{ type: 'puck-friction' },
	{ type: 'two-finger' },
	{ type: 'arm-endpoint' },
	{ type: 'arm-x' },
	{
		...{ type: 'formula', formula: 'a*sin(b) + exp(a/4) - log(3 + b^2)', tolerance: 0.1 },
		...{ resultUnit: '', variables: [variable('a', 0.2, 3, 1, 0.2), variable('b', -2, 2, 0, 0.2)] }
	}
];

describe('a manifold of 8 baseline SD each way', () => {
	for (const raw of RECORDS) {
		const record = taskRecordSchema.parse(raw);
		const task = createScaledTask(createTask(record));
		const covariance = diagonal(record.variables.map(() => 1));
		const mean = record.variables.map(() => 0);
		const isCurve = task.variableCount - task.resultCount === 1;
		const what = isCurve ? 'curve, step 0.02' : 'surface within 3 SD, spacing 0.25';
		bench(`${record.type}: ${what}`, () => {
			const start = projectToManifold({ task, mean, covariance });
			if (!start.ok) throw new RangeError(`${record.type} has no solution near its origin`);
			if (isCurve) traceManifold(task, start.point, { length: 8, step: 0.02 });
			else traceSurface(task, start.point, { reach: 3, spacing: 0.25 });
		});
	}
});
