import type { AnalysisPlan } from '$scheduler/protocol/analysis-plan';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { pathsIn, type ProtocolLine } from './protocol-line';
import { writePercent } from './write-percent';

/** What is measured when, the estimand, and how it is analysed. */
export function describeAnalysis({ analysis, visits }: ProtocolContent): ProtocolLine[] {
	if (!analysis) return [];
	const label = (visitNumber: number) =>
		visits.find(({ number }) => number === visitNumber)?.label ?? `visit ${visitNumber}`;
	const outcomes = analysis.outcomes.map(({ name, unit, rank, visitNumber }, index) => ({
		key: `outcome-${index + 1}`,
		term: `Outcome, ${rank}`,
		text: `${name}${unit ? `, ${unit}` : ''}, taken at ${label(visitNumber)} (visit ${visitNumber})`,
		tells: pathsIn(`analysis.outcomes.${index + 1}`, ['name', 'unit', 'rank', 'visitNumber'])
	}));
	return [
		...outcomes,
		...describeEstimand(analysis.estimand),
		...describeWritten(analysis),
		...describeLooks(analysis.interimLooks)
	];
}

function describeEstimand(estimand: AnalysisPlan['estimand']): ProtocolLine[] {
	const written = (['population', 'treatment', 'variable', 'summary'] as const).map((name) => ({
		key: `estimand-${name}`,
		term: `Estimand, ${name}`,
		text: estimand[name] || 'not said',
		tells: [`analysis.estimand.${name}`]
	}));
	const events = estimand.events.map(({ event, strategy }, index) => ({
		key: `event-${event}`,
		term: `Estimand, ${event.replaceAll('-', ' ')}`,
		text: strategy.replaceAll('-', ' '),
		tells: pathsIn(`analysis.estimand.events.${index + 1}`, ['event', 'strategy'])
	}));
	return [...written, ...events];
}

function describeWritten(analysis: AnalysisPlan): ProtocolLine[] {
	const terms = {
		analysis: 'Analysis',
		exclusions: 'Exclusions',
		stoppingRules: 'Stopping rules'
	} as const;
	return (Object.keys(terms) as (keyof typeof terms)[]).map((name) => ({
		key: name,
		term: terms[name],
		text: analysis[name] || 'not said',
		tells: [`analysis.${name}`]
	}));
}

function describeLooks(looks: readonly number[]): ProtocolLine[] {
	const text =
		looks.length === 0 ? 'none' : `after ${looks.map(writePercent).join(', ')} of the people`;
	const tells =
		looks.length === 0
			? ['analysis.interimLooks']
			: looks.map((_, index) => `analysis.interimLooks.${index + 1}`);
	return [{ key: 'looks', term: 'Interim looks', text, tells }];
}
