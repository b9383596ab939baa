import { decisionRecordSchema, type DecisionRecord } from '$scheduler/policies/decision-record';
import { explainRecord } from '$scheduler/policies/explain';
import { describeParameters } from '$lib/decisions/describe-parameters';
import { describeKind } from '$lib/decisions/kind-words';
import { pictureCloud } from './picture-cloud';

/** What a decision's card says of the decision itself, whatever its kind. */
export function describeRecord(record: DecisionRecord) {
	return {
		kind: record.kind,
		kindWords: describeKind(record.kind),
		parameters: describeParameters(record.parameters, record.inputs.task.resultUnit),
		coverNever: record.inputs.protocol.place.coverMax,
		explained: explainRecord(record),
		weighed: listWeighed(record),
		region: describeRegion(record),
		facts: listFacts(record),
		picture: pictureCloud(record)
	};
}

/** The stored parts put together as the engine wrote them. */
export function readRecord(stored: { inputs: string; output: string }): DecisionRecord {
	const output = JSON.parse(stored.output) as object;
	return decisionRecordSchema.parse({ ...output, inputs: JSON.parse(stored.inputs) });
}

/** One row for each share that was weighed. */
function listWeighed(record: DecisionRecord) {
	const rungs = [...(record.facts.place ?? []), ...(record.facts.lean ?? [])];
	const sd = record.facts.geometry?.sdTangent ?? null;
	return rungs.map((rung) => {
		const exits = [rung.exitPlus, rung.exitMinus].flatMap((s) => (s === null ? [] : [Math.abs(s)]));
		return {
			share: rung.share,
			lean: rung.lean,
			leanAxis: rung.leanAxis ?? null,
			wayOut: exits.length > 0 ? describeWayOut(Math.min(...exits), sd) : null,
			stay: rung.staySuccess,
			cover: rung.cover,
			accepted: rung.accepted,
			refusal: rung.refusal
		};
	});
}

/** In the person's own SD along the line; without one line, in the protocol's scaled units. */
function describeWayOut(distance: number, sd: number | null): string {
	return sd ? `${(distance / sd).toFixed(1)} SD` : `${distance.toFixed(1)} scaled`;
}

function describeRegion(record: DecisionRecord) {
	const region = record.parameters.region;
	if (!region) return null;
	const { variables } = record.inputs.task;
	return {
		share: region.share,
		stay: region.stay,
		reachSd: region.reachSd ?? null,
		success: region.nearestSuccess ?? null,
		center: variables.map(({ name, unit }, index) => ({
			name: name.replaceAll('_', ' '),
			unit,
			value: region.centerInUnits?.[index] ?? null
		}))
	};
}

function listFacts(record: DecisionRecord) {
	const { geometry, gates, band } = record.facts;
	return {
		alignmentDeg: geometry?.alignmentDeg ?? null,
		eigenvalueRatio: geometry?.eigenvalueRatio ?? null,
		driftP: gates?.pTrend ?? null,
		outlierShare: gates?.outlierShare ?? null,
		bandDistance: band?.distance ?? null,
		bandLimit: band?.limit ?? null,
		aims: record.inputs.protocol.aims,
		done: record.memory.done
	};
}
