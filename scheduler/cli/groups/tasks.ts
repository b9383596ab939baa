import { command, type CommandGroup } from '../command.ts';
import { computeOutcome, outcomeSchema, trialsInputSchema } from '../trial-inputs.ts';

/** Task models on the command line. */
export const TASK_COMMANDS: CommandGroup = {
	outcome: command(
		'Result and hit of each trial',
		{ input: trialsInputSchema, output: outcomeSchema },
		computeOutcome
	)
};
