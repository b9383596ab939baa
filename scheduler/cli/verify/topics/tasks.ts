import type { TopicGroup } from '../topic.ts';
import { ARM_TOPIC, FORMULA_TOPIC } from './task-models/arm-and-formula.ts';
import { CART_TOPIC } from './task-models/cart.ts';
import { PADDLE_TOPIC } from './task-models/paddle.ts';
import { TETHER_TOPIC } from './task-models/tether.ts';
import { PUCK_TOPIC, THROW_TOPIC } from './task-models/throws-and-pucks.ts';

/** Task models in check cases. */
export const TASK_TOPICS: TopicGroup = {
	'task-tether': TETHER_TOPIC,
	'task-paddle': PADDLE_TOPIC,
	'task-projectile': THROW_TOPIC,
	'task-puck': PUCK_TOPIC,
	'task-arm': ARM_TOPIC,
	'task-generic': FORMULA_TOPIC,
	'task-cart': CART_TOPIC
};
