import { writePercent } from '../write-percent';
import { gap, said } from './document-facts';
import { at, type Resolver } from './resolver';

const written = (text: string | undefined, href: string, missing: string) =>
	text ? said(text, href) : gap(missing);
const plural = (count: number, one: string, more: string) => `${count} ${count === 1 ? one : more}`;

/** What is done, compared and measured. */
export const designAnswers = {
	title: (facts) => said(facts.publicTitle, at(facts, 'title')),
	version: (facts) =>
		said(
			`version ${facts.number}, frozen ${facts.frozenOn}, SHA-256 ${facts.hash.slice(0, 12)}…`,
			at(facts, 'title')
		),
	amendments: (facts) =>
		said(
			`${plural(facts.versionCount, 'version', 'versions')}, each with who froze it, when and why`,
			`${facts.base}/protocol/compare`
		),
	people: (facts) =>
		facts.team.length > 0
			? said(
					facts.team.map(({ role, name }) => `${role}: ${name}`).join('; '),
					`${facts.base}/team`
				)
			: gap('Nobody has a role in the study yet.'),
	arms: (facts) =>
		said(
			facts.content.arms.map(({ name, rule }) => `${name} (${rule})`).join(', '),
			at(facts, 'arms')
		),
	design: (facts) => {
		const { arms, visits } = facts.content;
		const compared = arms.length > 1 ? `${arms.length} parallel arms` : 'one arm';
		return said(`${compared}, ${plural(visits.length, 'visit', 'visits')}`, at(facts, 'visits'));
	},
	objective: (facts) => {
		const { comparison, arms } = facts.content;
		const name = (key: string) => arms.find((arm) => arm.key === key)?.name ?? key;
		return comparison
			? said(
					`${name(comparison.armA)} against ${name(comparison.armB)} on ${comparison.outcome}`,
					at(facts, 'comparison')
				)
			: gap('No primary comparison is declared.');
	},
	setting: (facts) => said(facts.labName, at(facts, 'title')),
	interventions: (facts) =>
		said('blocks of every arm at every visit, with trials, length and gaps', at(facts, 'visits')),
	task: (facts) => said('task model with every number and unit', at(facts, 'task')),
	schedule: (facts) =>
		said(
			`${plural(facts.content.visits.length, 'visit', 'visits')} with their windows; table of assessments`,
			`${facts.base}/protocol/print?version=${facts.number}#schedule`
		),
	adherence: (facts) =>
		facts.content.missedDay
			? said(
					`missed practice day: ${facts.content.missedDay.rule.replaceAll('-', ' ')} within ${facts.content.missedDay.withinHours} h`,
					at(facts, 'booking/missed')
				)
			: gap('No rule for a missed practice day is declared.'),
	outcomes: (facts) => {
		const outcomes = facts.content.analysis?.outcomes ?? [];
		const { comparison } = facts.content;
		if (outcomes.length > 0) {
			const names = outcomes.map(({ name, rank }) => `${name} (${rank})`);
			return said(names.join(', '), at(facts, 'analysis'));
		}
		return comparison?.outcome
			? said(`${comparison.outcome} (primary)`, at(facts, 'comparison'))
			: gap('No outcome is declared.');
	},
	estimand: (facts) => {
		const estimand = facts.content.analysis?.estimand;
		return written(
			estimand &&
				[estimand.population, estimand.variable, estimand.summary].filter(Boolean).join('; '),
			at(facts, 'analysis'),
			'No estimand is written.'
		);
	},
	sampleSize: (facts) => {
		const { comparison } = facts.content;
		if (!comparison) return gap('No number of people is justified.');
		const { peoplePerArm, effectD, alpha, sides, peopleLostShare } = comparison;
		return said(
			`${peoplePerArm} per arm; d = ${effectD}, ${sides}-sided alpha ${alpha}, ${writePercent(peopleLostShare)} lost`,
			at(facts, 'comparison')
		);
	}
} satisfies Record<string, Resolver>;
