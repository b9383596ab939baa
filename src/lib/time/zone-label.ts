import { utcOffsetMinutes } from './wall-clock';

/** The city a zone is named after: 'America/New_York' is 'New York'. */
export function zoneCity(zone: string): string {
	return (zone.split('/').at(-1) ?? zone).replaceAll('_', ' ');
}

/** The offset in force at an instant: 'UTC+0', 'UTC-4', 'UTC+5:30'. */
export function utcOffsetLabel(instantMs: number, zone: string): string {
	const minutes = utcOffsetMinutes(instantMs, zone);
	const size = Math.abs(minutes);
	const rest = size % 60;
	const hours = `${Math.floor(size / 60)}${rest === 0 ? '' : `:${String(rest).padStart(2, '0')}`}`;
	return `UTC${minutes < 0 ? '-' : '+'}${hours}`;
}

/** City and offset: 'Lisbon (UTC+0)'; plain 'UTC' for UTC itself. */
export function zoneLabel(instantMs: number, zone: string): string {
	if (zone === 'UTC' || zone === 'Etc/UTC') return 'UTC';
	return `${zoneCity(zone)} (${utcOffsetLabel(instantMs, zone)})`;
}
