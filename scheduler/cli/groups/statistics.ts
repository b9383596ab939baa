import type { CommandGroup } from '../command.ts';

/** Tests, intervals, power and mixed models on the command line. */
export const STATISTICS_COMMANDS: CommandGroup = {};
