import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { pathsIn, type ProtocolLine, type Reader } from './protocol-line';
import { variantWords } from './variant-words';
import { writePercent } from './write-percent';

/** What no visit may exceed, the consent text, and declared exceptions from the usual blinding. */
export function describeLimits(content: ProtocolContent, { withRule }: Reader): ProtocolLine[] {
	const { limits, consentTextVersion, variants, trialSeconds } = content;
	return [
		{
			key: 'minutes',
			term: 'Minutes a visit',
			text: `at most ${limits.minutesPerVisit}`,
			tells: ['limits.minutesPerVisit']
		},
		{
			key: 'trials',
			term: 'Trials a visit',
			text: `at most ${limits.trialsPerVisit}`,
			tells: ['limits.trialsPerVisit']
		},
		...(trialSeconds === undefined
			? []
			: [
					{
						key: 'trial-seconds',
						term: 'One trial',
						text: `${trialSeconds} s with everything that belongs to it`,
						tells: ['trialSeconds']
					}
				]),
		...(withRule ? describeDoseLimits(content) : []),
		{
			key: 'consent',
			term: 'Consent text',
			text: `version ${consentTextVersion}`,
			tells: ['consentTextVersion']
		},
		...describeVariants(variants)
	];
}

/** Limits that say something of what is done to the task. */
function describeDoseLimits({ limits, task }: ProtocolContent): ProtocolLine[] {
	const { shiftMax, penaltyShareMax, variableMax } = limits;
	const unit = typeof task.resultUnit === 'string' ? ` ${task.resultUnit}` : '';
	const lines: ProtocolLine[] = [];
	if (shiftMax !== undefined) {
		const text = `at most ${shiftMax}${unit}`;
		lines.push({ key: 'shift', term: 'Target shift', text, tells: ['limits.shiftMax'] });
	}
	if (penaltyShareMax !== undefined) {
		const text = `at most ${writePercent(penaltyShareMax)} of a person’s own trials`;
		lines.push({ key: 'penalty', term: 'Penalty', text, tells: ['limits.penaltyShareMax'] });
	}
	const maxima = Object.entries(variableMax ?? {});
	return [
		...lines,
		...maxima.map(([name, max]) => ({
			key: `max-${name}`,
			term: `Largest ${name}`,
			text: String(max),
			tells: pathsIn('limits.variableMax', [name])
		}))
	];
}

function describeVariants(variants: readonly string[]): ProtocolLine[] {
	if (variants.length === 0) {
		const text = 'none: roles and blinding are as set out';
		return [{ key: 'variants', term: 'Declared exceptions', text, tells: ['variants'] }];
	}
	return variants.map((variant, index) => ({
		key: `variant-${variant}`,
		term: 'Declared exception',
		text: variantWords(variant),
		tells: [`variants.${index + 1}`]
	}));
}
