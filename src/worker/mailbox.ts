import { parseArgs } from 'node:util';
import { z } from 'zod';
import { createMailPages } from './mailbox/mail-http';
import { createMailTaker } from './mailbox/mail-smtp';
import { openMailStore } from './mailbox/mail-store';

const port = z.coerce.number().int().min(1).max(65535);
const optionsSchema = z.object({ 'smtp-port': port, 'http-port': port, folder: z.string().min(1) });

/** The local mailbox: takes mail on one loopback port and shows it on another. */
async function main(): Promise<void> {
	const { values } = parseArgs({
		options: {
			'smtp-port': { type: 'string' },
			'http-port': { type: 'string' },
			folder: { type: 'string' }
		}
	});
	const options = optionsSchema.parse(values);
	const store = await openMailStore(options.folder);
	const taker = createMailTaker(store);
	const pages = createMailPages(store);
	taker.on('error', (error: Error) => console.error(error.message));
	taker.listen(options['smtp-port'], '127.0.0.1');
	pages.listen(options['http-port'], '127.0.0.1');
	const stop = () => {
		taker.close();
		pages.close();
		pages.closeAllConnections();
		setTimeout(() => process.exit(0), 500).unref();
	};
	for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, stop);
}

main().catch((error: unknown) => {
	console.error(error instanceof Error ? error.message : error);
	process.exit(1);
});
