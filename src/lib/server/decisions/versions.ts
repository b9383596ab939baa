import { ENGINE_VERSION } from '$scheduler/engine-version';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { ruleText } from '$lib/protocol/policy/rule-text';
import { sha256Hex } from '$lib/server/record/canonical-json';

/** By what this process decides: stored with each decision. */
export function currentVersions(policyHash: string) {
	return {
		engineVersion: ENGINE_VERSION,
		runtimeVersion: `node ${process.versions.node}`,
		policyHash
	};
}

/** Hash of the rule that acts: policy settings and guard rails of a frozen version, the same for every arm. */
export function hashPolicy(content: ProtocolContent): string {
	return sha256Hex(ruleText(content));
}
