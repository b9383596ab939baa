import { zoneCity } from './zone-label';
import { editDistance } from '../ui/edit-distance';

const NAME_PATTERN = /^[A-Z][A-Za-z_]+(\/[A-Za-z0-9_+-]+)+$/;

/**
 * Whether a text is the name of an IANA time zone such as Europe/Lisbon.
 *
 * Abbreviations (CET, EST) and bare offsets (+01:00) are refused: they know no change of clocks,
 * or mean several places.
 */
export function isValidZone(zone: string): boolean {
	if (zone === 'UTC') return true;
	if (!NAME_PATTERN.test(zone)) return false;
	try {
		new Intl.DateTimeFormat('en', { timeZone: zone });
		return true;
	} catch {
		return false;
	}
}

/**
 * The zone a person most likely meant, or undefined when nothing is near.
 *
 * @example suggestZone('Lisboa') // 'Europe/Lisbon'
 */
export function suggestZone(typed: string): string | undefined {
	const wanted = plain(typed.split('/').at(-1) ?? '');
	if (wanted === '') return undefined;
	const known = OTHER_NAMES[wanted];
	if (known) return known;
	return nearest(wanted);
}

/** Every zone name the runtime lists, with the modern spellings people look for. */
export function zoneNames(): string[] {
	const names = new Set([...Intl.supportedValuesOf('timeZone'), 'UTC', ...MODERN_SPELLINGS]);
	return [...names].filter(isValidZone).sort();
}

function nearest(wanted: string): string | undefined {
	const allowed = wanted.length <= 4 ? 1 : 2;
	let best: { zone: string; distance: number } | undefined;
	for (const zone of zoneNames()) {
		const distance = editDistance(wanted, plain(zoneCity(zone)));
		if (distance <= allowed && (!best || distance < best.distance)) best = { zone, distance };
	}
	return best?.zone;
}

function plain(text: string): string {
	return text
		.normalize('NFD')
		.replace(/\p{M}/gu, '')
		.replace(/[_\s-]+/g, ' ')
		.trim()
		.toLowerCase();
}

const MODERN_SPELLINGS = [
	'Asia/Kolkata',
	'Asia/Kathmandu',
	'Asia/Ho_Chi_Minh',
	'Asia/Yangon',
	'Europe/Kyiv',
	'America/Argentina/Buenos_Aires'
];

/** Names in other languages and large cities that share another city's zone. */
const OTHER_NAMES: Record<string, string> = {
	barcelona: 'Europe/Madrid',
	beijing: 'Asia/Shanghai',
	bern: 'Europe/Zurich',
	boston: 'America/New_York',
	brasilia: 'America/Sao_Paulo',
	bruxelles: 'Europe/Brussels',
	cet: 'Europe/Berlin',
	delhi: 'Asia/Kolkata',
	edinburgh: 'Europe/London',
	est: 'America/New_York',
	frankfurt: 'Europe/Berlin',
	genf: 'Europe/Zurich',
	geneva: 'Europe/Zurich',
	gmt: 'Europe/London',
	hamburg: 'Europe/Berlin',
	kiev: 'Europe/Kyiv',
	koln: 'Europe/Berlin',
	london: 'Europe/London',
	lyon: 'Europe/Paris',
	mailand: 'Europe/Rome',
	milano: 'Europe/Rome',
	montreal: 'America/Toronto',
	moskau: 'Europe/Moscow',
	mumbai: 'Asia/Kolkata',
	munchen: 'Europe/Berlin',
	munich: 'Europe/Berlin',
	'new delhi': 'Asia/Kolkata',
	osaka: 'Asia/Tokyo',
	peking: 'Asia/Shanghai',
	porto: 'Europe/Lisbon',
	pst: 'America/Los_Angeles',
	roma: 'Europe/Rome',
	'san francisco': 'America/Los_Angeles',
	seattle: 'America/Los_Angeles',
	warszawa: 'Europe/Warsaw',
	washington: 'America/New_York',
	wien: 'Europe/Vienna'
};
