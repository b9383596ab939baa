import { building } from '$app/environment';
import type { Handle } from '@sveltejs/kit';
import { sequence } from '@sveltejs/kit/hooks';
import { handle as authHandle } from '$lib/server/auth/auth';
import { attach } from '$lib/server/http/attach';
import { headers } from '$lib/server/http/headers';
import { limitSignIn } from '$lib/server/http/limit-sign-in';
import { observe } from '$lib/server/http/observe';
import { reportError } from '$lib/server/http/report-error';
import { closeRuntime } from '$lib/server/runtime';

const auth: Handle = (input) => (building ? input.resolve(input.event) : authHandle(input));

export const handle = sequence(observe, headers, attach, limitSignIn, auth);
export const handleError = reportError;

process.once('sveltekit:shutdown' as 'beforeExit', () => void closeRuntime());
