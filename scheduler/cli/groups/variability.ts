import { command, type CommandGroup } from '../command.ts';
import { cloudInputSchema, cloudSchema, describeCloud } from '../describe-cloud.ts';

/** Clouds of trials on the command line. */
export const VARIABILITY_COMMANDS: CommandGroup = {
	cloud: command(
		'Mean, covariance and the four ellipsoids of trials',
		{ input: cloudInputSchema, output: cloudSchema },
		describeCloud
	)
};
