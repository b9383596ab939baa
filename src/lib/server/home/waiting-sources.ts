import { loadTeamWaiting } from './team-waiting';
import { findGatesWaiting } from './gates-waiting';
import type { WaitingSource } from './waiting';

/** Every part of the product that can have something waiting for somebody. */
export const waitingSources: WaitingSource[] = [loadTeamWaiting, findGatesWaiting];
