import type { CommandGroup } from '../command.ts';

/** Learners and learning curves on the command line. */
export const LEARNING_COMMANDS: CommandGroup = {};
