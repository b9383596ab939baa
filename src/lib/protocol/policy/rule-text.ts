import { equaliseBlockLengths, policySettingsSchema } from '$scheduler/policies/policy-settings';
import {
	armSchema,
	guardRailsSchema,
	type ProtocolContent
} from '$scheduler/protocol/protocol-content';
import { buildContent } from '../build-content';
import { buildPolicy } from '../build-policy';
import { canonicalText } from '../canonical-text';
import { hasAdaptiveTime } from '../has-adaptive-time';
import type { ProtocolDraft } from '../protocol-draft';

/** What decides about blocks, the same for every arm. */
type Rule = Pick<ProtocolContent, 'policy' | 'guardRails' | 'arms'>;

/** The rule as one text; its hash names the rule wherever it acts. */
export function ruleText({ policy, guardRails, arms }: Rule): string {
	return canonicalText({ policy, guardRails, arms });
}

/** The rule of a draft as freezing would write it; null while a part of it cannot be read. */
export function readRule(draft: ProtocolDraft): Rule | null {
	const { guardRails, arms } = buildContent(draft);
	const policy = policySettingsSchema.safeParse(buildPolicy(draft));
	const rails = guardRailsSchema.safeParse(guardRails);
	const read = armSchema.array().safeParse(arms);
	if (!policy.success || !rails.success || !read.success) return null;
	return {
		policy: hasAdaptiveTime(draft) ? equaliseBlockLengths(policy.data) : {},
		guardRails: rails.data,
		arms: read.data
	};
}

/** SHA-256 of a text, hexadecimal; null where the browser has no hashing (pages without https). */
export async function hashText(text: string): Promise<string | null> {
	const subtle = globalThis.crypto.subtle as SubtleCrypto | undefined;
	if (!subtle) return null;
	const bytes = new Uint8Array(await subtle.digest('SHA-256', new TextEncoder().encode(text)));
	return [...bytes].map((byte) => byte.toString(16).padStart(2, '0')).join('');
}
