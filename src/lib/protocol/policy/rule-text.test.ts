import { describe, expect, it } from 'vitest';
import { hashPolicy } from '$lib/server/decisions/versions';
import { createPatternDraft } from '../patterns';
import { readContent } from '../read-content';
import { setPolicyValue } from './policy-values';
import { hashText, readRule, ruleText } from './rule-text';

function finishedDraft() {
	const draft = createPatternDraft('two-arms');
	Object.assign(draft.comparison, { effectD: 0.8, effectSource: 'pilot', peoplePerArm: 30 });
	return draft;
}

async function hashesOf(draft = finishedDraft()) {
	const read = readContent(draft);
	const rule = readRule(draft);
	if (!read.ok || !rule) throw new Error('the draft is finished');
	return { onPage: await hashText(ruleText(rule)), onServer: hashPolicy(read.content) };
}

describe('hash of the rule', () => {
	it('is the same on the page, before freezing, as where the rule acts', async () => {
		const { onPage, onServer } = await hashesOf();
		expect(onPage).toBe(onServer);
		expect(onPage).toMatch(/^[0-9a-f]{64}$/);
	});

	it('differs once a setting or a guard rail differs', async () => {
		const plain = await hashesOf();
		const wider = finishedDraft();
		setPolicyValue(wider, 'band.q1', 0.95);
		const railed = finishedDraft();
		railed.guardRails.automaticCoverMax = 0.4;
		const [a, b] = [await hashesOf(wider), await hashesOf(railed)];
		expect(new Set([plain.onPage, a.onPage, b.onPage]).size).toBe(3);
		expect([a.onPage, b.onPage]).toEqual([a.onServer, b.onServer]);
	});

	it('is the same where a product default is said or left out', async () => {
		const said = finishedDraft();
		setPolicyValue(said, 'band.q1', 0.99);
		expect((await hashesOf(said)).onPage).toBe((await hashesOf()).onPage);
	});

	it('waits while a setting cannot be read', () => {
		const draft = finishedDraft();
		setPolicyValue(draft, 'band.q1', 7);
		expect(readRule(draft)).toBeNull();
	});
});
