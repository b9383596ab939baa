import { readFileSync } from 'node:fs';
import { parseArgs } from 'node:util';
import { z } from 'zod';
import { createSignOn } from './sign-on/sign-on-server';

const optionsSchema = z.object({
	port: z.coerce.number().int().min(1).max(65535),
	application: z.url(),
	client: z.string().min(1),
	people: z.string().optional()
});
const peopleSchema = z.array(z.object({ role: z.string(), name: z.string(), email: z.string() }));

/** The local stand-in for a university's sign-on, for demo and rehearsal. */
async function main(): Promise<void> {
	const { values } = parseArgs({
		options: {
			port: { type: 'string' },
			application: { type: 'string' },
			client: { type: 'string' },
			people: { type: 'string' }
		}
	});
	const { people, ...options } = optionsSchema.parse(values);
	const known = people ? peopleSchema.parse(JSON.parse(readFileSync(people, 'utf8'))) : [];
	const server = await createSignOn({ ...options, people: known });
	server.listen(options.port, '127.0.0.1');
	const stop = () => {
		server.close();
		server.closeAllConnections();
	};
	for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, stop);
}

main().catch((error: unknown) => {
	console.error(error instanceof Error ? error.message : error);
	process.exit(1);
});
