import { RateLimiterMemory } from 'rate-limiter-flexible';

/** How often one key may try, by purpose. */
const limiters = {
	'sign-in': new RateLimiterMemory({ points: 30, duration: 10 * 60 }),
	link: new RateLimiterMemory({ points: 5, duration: 10 * 60 }),
	token: new RateLimiterMemory({ points: 60, duration: 10 * 60 })
};

/**
 * Counts one attempt. False means too many: answer 429 and say when to try again.
 * Counts are kept per web process.
 */
export async function mayTry(purpose: keyof typeof limiters, key: string): Promise<boolean> {
	try {
		await limiters[purpose].consume(key);
		return true;
	} catch {
		return false;
	}
}
