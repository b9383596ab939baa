import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { canonicalJson } from '../../scheduler/policies/canonical-json.ts';
import { decideNextBlock } from '../../scheduler/policies/decide.ts';
import { decisionRecordSchema } from '../../scheduler/policies/decision-record.ts';
import { replayDecision } from '../../scheduler/policies/replay-decision.ts';

/** Records as an earlier engine stored them, see data/README-engine.md. */
const texts = z
	.array(z.string())
	.parse(JSON.parse(readFileSync(new URL('data/stored-decisions.json', import.meta.url), 'utf8')));
const stored = texts.map((text) => ({
	text,
	record: decisionRecordSchema.parse(JSON.parse(text))
}));
const digest = (text: string) => createHash('sha256').update(text).digest('hex');

describe('decisions stored by engine 1.0.0', () => {
	it('are of many kinds', () => {
		const kinds = new Set(stored.map(({ record }) => record.kind));
		expect([...kinds].sort()).toEqual([
			...['baseline', 'hold', 'maintenance', 'practice', 'probe', 'region', 'retention', 'shift'],
			'washout'
		]);
	});

	it.each(stored.map((one, i) => [i + 1, one.record.kind, one] as const))(
		'record %d, %s, replays to the same bytes',
		(_number, _kind, { text, record }) => {
			const { inputs, engineVersion, runtimeVersion, policyHash } = record;
			const versions = { engineVersion, runtimeVersion, policyHash };
			const replay = replayDecision({ stored: record, inputs, versions, digest });
			if (runtimeVersion !== `node ${process.versions.node}`) {
				// Another runtime may round its elementary functions otherwise.
				expect(replay.equal || replay.withinTolerance).toBe(true);
				return;
			}
			expect(replay).toEqual({ equal: true, sameVersions: true });
			const again = decideNextBlock({ ...inputs, versions, digest });
			expect(canonicalJson(again)).toBe(text);
		}
	);
});
