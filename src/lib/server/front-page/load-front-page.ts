import { computeThrower, coverLimits } from './compute-thrower';
import { findSampleChain } from './sample-chain';
import { computeSamplePower } from './sample-power';

export type FrontPage = ReturnType<typeof computeFrontPage>;

let computed: FrontPage | undefined;

/** Everything the front page shows, computed by the engine once in the life of the process. */
export function loadFrontPage(): FrontPage {
	computed ??= computeFrontPage();
	return computed;
}

function computeFrontPage() {
	return {
		thrower: computeThrower(),
		coverLimits,
		chain: findSampleChain(),
		power: computeSamplePower()
	};
}
