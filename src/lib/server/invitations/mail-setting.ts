import type { Settings } from '$lib/server/config';
import type { KeyFolder } from '$lib/server/keys/person-keys';

/** What writing to participants needs from this installation. */
export interface MailSetting {
	/** Opens contact data and seals what is written. */
	keys: KeyFolder;
	/** Address of the site, for links. */
	origin: string;
	/** The monitored mailbox that mails come from and answers go to. */
	fromAddress: string;
}

export function mailSettingOf(
	settings: Pick<Settings, 'ORIGIN' | 'MAIL_FROM'>,
	keys: { folder: KeyFolder }
): MailSetting {
	return { keys: keys.folder, origin: settings.ORIGIN, fromAddress: settings.MAIL_FROM };
}
