import { z } from 'zod';

const port = z.coerce.number().int().min(1).max(65535);
const key32 = z
	.string()
	.refine((text) => Buffer.from(text, 'base64url').length === 32, 'needs 32 bytes in base64url');
const optionalText = z
	.string()
	.optional()
	.transform((text) => (text === '' ? undefined : text));

const settingsSchema = z
	.object({
		OVALRY_MODE: z.enum(['demo', 'own']).default('own'),
		HOST: z.string().default('127.0.0.1'),
		PORT: port.default(3000),
		ORIGIN: z.url(),
		DATABASE_URL: z.string().regex(/^postgres(ql)?:\/\//, 'needs a postgres:// address'),
		AUTH_SECRET: z.string().min(32, 'needs at least 32 characters'),
		OVALRY_KEYS: z.string().min(1),
		OVALRY_WRAPPING_KEY: key32,
		OVALRY_ALLOCATION_KEY: key32,
		MAIL_FROM: z.string().default('lab@ovalry.example'),
		SMTP_HOST: optionalText,
		SMTP_PORT: port.default(587),
		SMTP_USER: optionalText,
		SMTP_PASSWORD: optionalText,
		SMTP_SECURE: z.enum(['true', 'false']).default('false'),
		OVALRY_MAILBOX_SMTP_PORT: port.optional(),
		OVALRY_MAILBOX_URL: z.url().optional(),
		OIDC_ISSUER: z.url().optional(),
		OIDC_CLIENT_ID: optionalText,
		OIDC_CLIENT_SECRET: optionalText,
		OIDC_LABEL: z.string().default('your university'),
		LOG_LEVEL: z.enum(['silent', 'error', 'warn', 'info', 'debug']).default('info')
	})
	.superRefine((settings, context) => {
		const fault = (path: string, message: string) =>
			context.addIssue({ code: 'custom', path: [path], message });
		if (!settings.SMTP_HOST && !settings.OVALRY_MAILBOX_SMTP_PORT) {
			fault('SMTP_HOST', 'is missing, and there is no local mailbox either');
		}
		if (settings.OIDC_ISSUER && !settings.OIDC_CLIENT_ID) fault('OIDC_CLIENT_ID', 'is missing');
		if (settings.OVALRY_MODE !== 'demo') return;
		if (settings.HOST !== '127.0.0.1') fault('HOST', 'must be 127.0.0.1 in demo mode');
		if (settings.SMTP_HOST)
			fault('SMTP_HOST', 'must not be set in demo mode: demo mail stays here');
		if (settings.OIDC_ISSUER && !isLoopback(settings.OIDC_ISSUER)) {
			fault('OIDC_ISSUER', 'must be the local stand-in in demo mode');
		}
	});

export type Settings = z.output<typeof settingsSchema>;

function isLoopback(address: string): boolean {
	return ['127.0.0.1', 'localhost', '[::1]'].includes(new URL(address).hostname);
}

/**
 * Parses settings from environment variables.
 *
 * @throws {Error} naming every variable at fault and what it needs
 */
export function parseSettings(environment: Record<string, string | undefined>): Settings {
	const parsed = settingsSchema.safeParse(environment);
	if (parsed.success) return parsed.data;
	const faults = parsed.error.issues.map((issue) => `  ${issue.path.join('.')}: ${issue.message}`);
	throw new Error(`Ovalry cannot start with these settings:\n${faults.join('\n')}`);
}

let settings: Settings | undefined;

/** The settings of this process, parsed once. This is the only place that reads the environment. */
export function config(): Settings {
	settings ??= parseSettings(process.env);
	return settings;
}

/** Address of the owner's connection and the passwords of the two other roles: migrations and seed only. */
export function ownerConfig() {
	const schema = z.object({
		OVALRY_OWNER_URL: z.string().min(1),
		OVALRY_APP_PASSWORD: z.string().min(8).optional(),
		OVALRY_RESEARCH_PASSWORD: z.string().min(8).optional()
	});
	return schema.parse(process.env);
}
