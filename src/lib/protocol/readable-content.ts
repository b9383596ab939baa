import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { VisitPlan } from '$scheduler/protocol/visit-plan';
import type { Reader } from './protocol-line';

/** A version as a reader may have it: without the rule, neither what single arms run nor how blocks are set. */
export function readableContent(content: ProtocolContent, { withRule }: Reader): ProtocolContent {
	return withRule ? content : { ...content, visits: content.visits.map(withoutRule) };
}

function withoutRule({ armBlocks: _, blocks, ...visit }: VisitPlan): VisitPlan {
	return {
		...visit,
		blocks: blocks.map((block) => {
			const { number, purpose, trials, restMinutes, warmUpTrials } = block;
			const { restBetweenTrialsSeconds, restAfterMinutes } = block;
			return {
				...{ number, purpose, trials, restMinutes, warmUpTrials },
				...{ restBetweenTrialsSeconds, restAfterMinutes }
			};
		})
	};
}
