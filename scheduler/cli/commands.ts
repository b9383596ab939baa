import type { CommandGroup } from './command.ts';
import { ALLOCATION_COMMANDS } from './groups/allocation.ts';
import { DESIGN_COMMANDS } from './groups/designs.ts';
import { LEARNING_COMMANDS } from './groups/learning.ts';
import { POLICY_COMMANDS } from './groups/policies.ts';
import { PROTOCOL_COMMANDS } from './groups/protocols.ts';
import { STATISTICS_COMMANDS } from './groups/statistics.ts';
import { TASK_COMMANDS } from './groups/tasks.ts';
import { VARIABILITY_COMMANDS } from './groups/variability.ts';
import { VERIFY_COMMANDS } from './groups/verify.ts';

/** Everything the engine can be asked on the command line; each part keeps its own group. */
export const COMMANDS: CommandGroup = {
	...TASK_COMMANDS,
	...VARIABILITY_COMMANDS,
	...POLICY_COMMANDS,
	...DESIGN_COMMANDS,
	...PROTOCOL_COMMANDS,
	...LEARNING_COMMANDS,
	...STATISTICS_COMMANDS,
	...ALLOCATION_COMMANDS,
	...VERIFY_COMMANDS
};
