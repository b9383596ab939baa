import type { TaskRecord } from '$scheduler/tasks/task-record';
import { drawArm } from './arm-scene';
import { drawCart } from './cart-scene';
import { drawPaddle } from './paddle-scene';
import { drawPuck } from './puck-scene';
import type { Scene } from './scene';
import { drawFormula, drawSum } from './sum-scene';
import { drawTether } from './tether-scene';
import { drawThrow } from './throw-scene';

/** What one execution looks like where it is done: a trajectory, a posture, forces. */
export function drawScene(record: TaskRecord, x: readonly number[]): Scene {
	switch (record.type) {
		case 'tethered-ball':
			return drawTether(record, x);
		case 'projectile':
		case 'throw-height':
		case 'throw-azimuth':
			return drawThrow(record, x);
		case 'puck':
		case 'puck-push':
		case 'puck-friction':
			return drawPuck(record, x);
		case 'paddle-bounce':
			return drawPaddle(record, x);
		case 'two-finger':
		case 'linear':
			return drawSum(record, x);
		case 'arm-endpoint':
		case 'arm-x':
			return drawArm(record, x);
		case 'cart-pendulum':
			return drawCart(record, x);
		case 'formula':
			return drawFormula(record, x);
	}
}
