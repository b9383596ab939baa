import type { StudyRole } from '$lib/server/db/schema';

/** The invented team of the demo. Names say that they are made up; addresses lead nowhere. */
export const team: { key: string; name: string; role: StudyRole | 'steward' }[] = [
	{ key: 'steward', name: 'Stu Standin', role: 'steward' },
	{ key: 'investigator', name: 'Ivy Invented', role: 'investigator' },
	{ key: 'coordinator', name: 'Cora Contrived', role: 'coordinator' },
	{ key: 'operator', name: 'Otto Sample', role: 'operator' },
	{ key: 'statistician', name: 'Stella Staged', role: 'statistician' },
	{ key: 'unblinded', name: 'Uma Unreal', role: 'unblinded-statistician' },
	{ key: 'approver', name: 'Ada Placeholder', role: 'approver' },
	{ key: 'monitor', name: 'Milo Mockup', role: 'monitor' }
];

export const emailOf = (key: string) => `${key}@tidewater.example`;

const firstNames =
	'Ines Paulo Una Tess Kenji Rosa Olaf Ada Bo Nils Mara Theo Lia Juno Max Pia Ravi Zoe Emil Hana Ivo Gia Sten Vera'.split(
		' '
	);
const lastNames =
	'Invented Pretend Unreal Fictional Madeup Nobody Imaginary Example Placeholder Assumed Dreamt Sketch'.split(
		' '
	);

/** Invented participants with their own zones and the times they can come. */
export function listPeople() {
	return firstNames.map((first, index) => {
		const last = lastNames[index % lastNames.length] ?? 'Invented';
		return {
			name: `${first} ${last}`,
			email: `${first}.${last}.${index + 1}@mail.example`.toLowerCase(),
			language: 'en',
			zone: index % 8 === 4 ? 'Europe/Madrid' : 'Europe/Lisbon',
			availability: index % 5 === 1 ? 'mornings' : index % 5 === 3 ? 'afternoons' : 'any',
			phone: '',
			code: ''
		};
	});
}
