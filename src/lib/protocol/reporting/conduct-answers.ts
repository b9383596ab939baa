import { policySettingsSchema } from '$scheduler/policies/policy-settings';
import { hasAdaptiveTime } from '../has-adaptive-time';
import { variantWords } from '../variant-words';
import { writePercent } from '../write-percent';
import { gap, ofRule, said } from './document-facts';
import { at, type Resolver } from './resolver';

const written = (text: string | undefined, href: string, missing: string) =>
	text ? said(text, href) : gap(missing);
const plural = (count: number, one: string, more: string) => `${count} ${count === 1 ? one : more}`;

/** How it is kept honest: allocation, blinding, analysis, oversight, and the rule. */
export const conductAnswers = {
	allocation: (facts) => {
		if (facts.content.arms.length < 2) return gap('There is one arm: nobody is allocated.');
		return facts.isSealed
			? said(
					'a seeded sequence, sealed before the first person; its method is known to the unblinded statistician only until unblinding',
					at(facts, 'arms')
				)
			: gap('The allocation of this version is not sealed yet.');
	},
	concealment: (facts) =>
		facts.isSealed
			? said(
					'released one person at a time, after their baseline data passed; the key is kept outside the database',
					at(facts, 'arms')
				)
			: gap('The allocation of this version is not sealed yet.'),
	blinding: (facts) => {
		const { variants } = facts.content;
		const text =
			variants.length === 0
				? 'participants, investigator, coordinator, operator and statistician are blinded; approver and unblinded statistician are not'
				: `usual blinding, but: ${variants.map(variantWords).join('; ')}`;
		return said(text, at(facts, 'limits'));
	},
	dataCollection: (facts) =>
		said(
			'every trial from the rig’s file, checked when it comes; quality verdict',
			at(facts, 'task')
		),
	analysis: (facts) =>
		written(
			facts.content.analysis?.analysis,
			at(facts, 'analysis'),
			'No analysis plan is written in the protocol.'
		),
	exclusions: (facts) =>
		written(
			facts.content.analysis?.exclusions,
			at(facts, 'analysis'),
			'What is excluded from analysis is not written.'
		),
	interim: (facts) => {
		const analysis = facts.content.analysis;
		if (!analysis) return gap('Whether there are interim looks is not written.');
		const looks = analysis.interimLooks.map(writePercent).join(', ');
		return said(looks ? `after ${looks} of the people` : 'none', at(facts, 'analysis'));
	},
	stopping: (facts) =>
		written(
			facts.content.analysis?.stoppingRules,
			at(facts, 'analysis'),
			'No stopping rule is written; any member may pause the study at once.'
		),
	monitor: (facts) => {
		const monitors = facts.team.filter(({ role }) => role === 'Monitor');
		return monitors.length > 0
			? said(monitors.map(({ name }) => name).join(', '), `${facts.base}/team`)
			: gap('No monitor has been named.');
	},
	ethics: (facts) => {
		const valid = facts.approvals.filter(({ state }) => state === 'valid');
		return valid.length > 0
			? said(
					valid.map(({ board, reference, to }) => `${board}, ${reference}, until ${to}`).join('; '),
					at(facts, 'ethics')
				)
			: gap('No valid ethics approval names this version.');
	},
	signOff: (facts) =>
		facts.signedOff
			? said(`${facts.signedOff.by}, ${facts.signedOff.on}`, `${facts.base}/power`)
			: gap('The statistician has not signed this version off.'),
	consent: (facts) =>
		said(`consent text, version ${facts.content.consentTextVersion}`, at(facts, 'limits/consent')),
	confidentiality: (facts) =>
		said(
			'people are known by codes; contact data are kept apart, each person’s under a key of their own',
			at(facts, 'limits')
		),
	limits: (facts) => {
		const { limits } = facts.content;
		return said(
			`at most ${limits.minutesPerVisit} min and ${limits.trialsPerVisit} trials a visit`,
			at(facts, 'limits')
		);
	},
	rule: (facts) =>
		ofRule(facts, () => {
			if (!hasAdaptiveTime(facts.content)) return gap('Nothing is chosen person by person.');
			const parsed = policySettingsSchema.safeParse(facts.content.policy);
			const aims = parsed.success ? Object.keys(parsed.data.aims).join(' and ') : 'as written';
			return said(
				`aims: ${aims}; every setting by value, hash with each decision`,
				at(facts, 'aims')
			);
		}),
	guardRails: (facts) =>
		ofRule(facts, () => {
			const { automaticCoverMax, automaticReachSdMax } = facts.content.guardRails;
			return said(
				`held for the approver over ${writePercent(automaticCoverMax)} cover or ${automaticReachSdMax} SD reach; else plain practice`,
				at(facts, 'guard-rails')
			);
		}),
	envelope: (facts) =>
		ofRule(facts, () =>
			said('largest dose of any decision, with breaches counted', at(facts, 'envelope'))
		),
	instructions: (facts) => {
		const count = facts.content.instructions?.length ?? 0;
		return count > 0
			? ofRule(facts, () => said(plural(count, 'text', 'texts'), at(facts, 'further')))
			: gap('The instructions read to people are not in the protocol.');
	},
	operators: (facts) => {
		const operators = facts.team.filter(({ role }) => role === 'Operator');
		return operators.length > 0
			? said(operators.map(({ name }) => name).join(', '), `${facts.base}/team`)
			: gap('No operator has been named.');
	}
} satisfies Record<string, Resolver>;
