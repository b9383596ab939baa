import type { z } from 'zod';

export type JsonAnswer<Value> =
	| { ok: true; value: Value }
	/** signed-out: the session ended; failed: no answer, or not what was expected. */
	| { ok: false; reason: 'signed-out' | 'failed' };

/** Fetches JSON of this site and checks its shape. A cancelled request throws as fetch does. */
export async function fetchJson<Schema extends z.ZodType>(
	address: string,
	schema: Schema,
	request: RequestInit = {}
): Promise<JsonAnswer<z.output<Schema>>> {
	try {
		const response = await fetch(address, request);
		if (response.redirected && new URL(response.url).pathname.startsWith('/signin')) {
			return { ok: false, reason: 'signed-out' };
		}
		if (!response.ok) return { ok: false, reason: 'failed' };
		const parsed = schema.safeParse(await response.json());
		return parsed.success ? { ok: true, value: parsed.data } : { ok: false, reason: 'failed' };
	} catch (error) {
		if (request.signal?.aborted) throw error;
		return { ok: false, reason: 'failed' };
	}
}

/** Sends JSON and reads JSON back. */
export function postJson<Schema extends z.ZodType>(
	address: string,
	body: unknown,
	schema: Schema,
	signal?: AbortSignal
): Promise<JsonAnswer<z.output<Schema>>> {
	return fetchJson(address, schema, {
		method: 'POST',
		headers: { 'content-type': 'application/json' },
		body: JSON.stringify(body),
		...(signal ? { signal } : {})
	});
}
