import type { CommandGroup } from '../command.ts';

/** Allocation to arms on the command line. */
export const ALLOCATION_COMMANDS: CommandGroup = {};
