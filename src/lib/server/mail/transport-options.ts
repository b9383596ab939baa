import type { Settings } from '$lib/server/config';

export type TransportOptions = {
	host: string;
	port: number;
	secure: boolean;
	user?: string | undefined;
	password?: string | undefined;
};

/** Where mail goes: the lab's mail server, or the local mailbox when none is set. */
export function findTransportOptions(settings: Settings): TransportOptions {
	if (settings.SMTP_HOST) {
		return {
			host: settings.SMTP_HOST,
			port: settings.SMTP_PORT,
			secure: settings.SMTP_SECURE === 'true',
			user: settings.SMTP_USER,
			password: settings.SMTP_PASSWORD
		};
	}
	const port = settings.OVALRY_MAILBOX_SMTP_PORT;
	if (!port) throw new Error('neither a mail server nor a local mailbox is set');
	return { host: '127.0.0.1', port, secure: false };
}
