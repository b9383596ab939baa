import { command, type CommandGroup } from '../command.ts';
import {
	bouncingInputSchema,
	bouncingSchema,
	describeBouncing
} from '../tasks/describe-bouncing.ts';
import { describeJacobians, jacobianSchema } from '../tasks/describe-jacobian.ts';
import {
	describeManifold,
	manifoldInputSchema,
	manifoldSchema
} from '../tasks/describe-manifold.ts';
import { mapTransport, transportInputSchema, transportSchema } from '../tasks/map-transport.ts';
import { computeOutcome, outcomeSchema, trialsInputSchema } from '../trial-inputs.ts';

/** Task models on the command line. */
export const TASK_COMMANDS: CommandGroup = {
	outcome: command(
		'Result and hit of each trial',
		{ input: trialsInputSchema, output: outcomeSchema },
		computeOutcome
	),
	jacobian: command(
		'Slopes of the results at each trial, and what leaves them unchanged',
		{ input: trialsInputSchema, output: jacobianSchema },
		describeJacobians
	),
	manifold: command(
		'All executions that solve a task, by arc length',
		{ input: manifoldInputSchema, output: manifoldSchema },
		describeManifold
	),
	bouncing: command(
		'Steady bouncing of a ball on a paddle, and whether errors die out',
		{ input: bouncingInputSchema, output: bouncingSchema },
		describeBouncing
	),
	'transport-map': command(
		'Effort, smoothness and predictability of moving a cart with a pendulum',
		{ input: transportInputSchema, output: transportSchema },
		mapTransport
	)
};
