/**
 * Values of a protocol that everybody with a part in the study may read. Whatever is not listed here
 * may say how blocks are chosen, and stays with those who may know block parameters by design.
 */
const readByAll = [
	/^format$/,
	/^task\./,
	/^arms\.\d+\.(key|name|rule|master)$/,
	/^visits\.\d+\.(number|label|kind|minutes|setupMinutes|cleanupMinutes)$/,
	/^visits\.\d+\.gapBefore(\.(minHours|targetHours|maxHours|nightsBetween))?$/,
	/^visits\.\d+\.blocks\.\d+\.(number|purpose|trials|restMinutes|warmUpTrials)$/,
	/^visits\.\d+\.blocks\.\d+\.(restBetweenTrialsSeconds|restAfterMinutes)$/,
	/^booking\./,
	/^(missedDay|relaxation|analysis)(\.|$)/,
	/^(readyLeadHours|invitationDelayHours|consentTextVersion|trialSeconds)$/,
	/^earliestStartHours\./,
	/^comparison(\.|$)/,
	/^limits\.(minutesPerVisit|trialsPerVisit)$/,
	/^variants(\.|$)/
];

/** Whether a reader may see the value at this path; `withRule` is who may know the rule. */
export function isReadable(path: string, { withRule }: { withRule: boolean }): boolean {
	return withRule || readByAll.some((pattern) => pattern.test(path));
}
