import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { pathsIn, type ProtocolLine } from './protocol-line';
import { writePercent } from './write-percent';

const of = (...names: string[]) => pathsIn('comparison', names);
const writeSource = (text: string | undefined) => (text ? `; ${text}` : '; no source given');

/** What is compared, by which test, and on which assumptions the number of people rests. */
export function describeComparison({ comparison, arms }: ProtocolContent): ProtocolLine[] {
	if (!comparison) {
		const text = 'nothing: no primary comparison is declared';
		return [{ key: 'what', term: 'Compared', text, tells: ['comparison'] }];
	}
	const name = (key: string) => arms.find((arm) => arm.key === key)?.name ?? key;
	const { alpha, sides, effectD, effectSource, peoplePerArm } = comparison;
	return [
		{
			key: 'what',
			term: 'Compared',
			text: `${name(comparison.armA)} against ${name(comparison.armB)} on ${comparison.outcome}`,
			tells: of('armA', 'armB', 'outcome')
		},
		{
			key: 'test',
			term: 'Test',
			text: `two-sample t, ${sides}-sided, alpha ${alpha}`,
			tells: of('sides', 'alpha')
		},
		{
			key: 'effect',
			term: 'Effect',
			text: `d = ${effectD}${writeSource(effectSource)}`,
			tells: of('effectD', 'effectSource')
		},
		{
			key: 'people',
			term: 'People',
			text: `${peoplePerArm} per arm at the start`,
			tells: of('peoplePerArm')
		},
		{
			key: 'people-lost',
			term: 'People lost',
			text: writePercent(comparison.peopleLostShare) + writeSource(comparison.peopleLostSource),
			tells: of('peopleLostShare', 'peopleLostSource')
		},
		{
			key: 'effect-lost',
			term: 'Effect lost',
			text: writePercent(comparison.effectLostShare) + writeSource(comparison.effectLostSource),
			tells: of('effectLostShare', 'effectLostSource')
		},
		...describeAuthors(comparison.enteredBy ?? {})
	];
}

const assumptionNames: Record<string, string> = {
	effectD: 'effect',
	peopleLostShare: 'people lost',
	effectLostShare: 'effect lost',
	alpha: 'alpha',
	peoplePerArm: 'people'
};

function describeAuthors(enteredBy: Readonly<Record<string, string>>): ProtocolLine[] {
	const entries = Object.entries(enteredBy);
	if (entries.length === 0) return [];
	return [
		{
			key: 'entered-by',
			term: 'Entered by',
			text: entries.map(([name, who]) => `${assumptionNames[name] ?? name}: ${who}`).join('; '),
			tells: of(...entries.map(([name]) => `enteredBy.${name}`))
		}
	];
}
