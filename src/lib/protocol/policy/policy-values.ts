import { POLICY_DEFAULTS } from '$scheduler/policies/policy-settings';
import { canonicalText } from '../canonical-text';
import type { ProtocolDraft } from '../protocol-draft';
import type { PolicyField } from './policy-field';

type Draft = Pick<ProtocolDraft, 'otherPolicy'>;

/** What the form holds at a setting; undefined: nothing is said, so the product default holds. */
export function getPolicyValue({ otherPolicy }: Draft, path: string): unknown {
	return valueAt(otherPolicy, path);
}

/** Writes a setting; undefined takes it away, and parts that are left empty with it. */
export function setPolicyValue(draft: Draft, path: string, value: unknown): void {
	draft.otherPolicy = withValue(draft.otherPolicy, path.split('.'), value);
}

/** The product default of a setting; undefined where the engine has none. */
export function getPolicyDefault(path: string): unknown {
	return valueAt(POLICY_DEFAULTS, path);
}

/** Whether a setting was chosen by somebody: said, and other than the product default. */
export function differsFromDefault(draft: Draft, { path }: Pick<PolicyField, 'path'>): boolean {
	const value = getPolicyValue(draft, path);
	if (value === undefined) return false;
	return canonicalText(value) !== canonicalText(getPolicyDefault(path));
}

function valueAt(from: unknown, path: string): unknown {
	return path
		.split('.')
		.reduce<unknown>((value, step) => (isRecord(value) ? value[step] : undefined), from);
}

function withValue(
	record: Readonly<Record<string, unknown>>,
	[step, ...rest]: readonly string[],
	value: unknown
): Record<string, unknown> {
	if (step === undefined) return { ...record };
	const inner = record[step];
	const next = rest.length === 0 ? value : withValue(isRecord(inner) ? inner : {}, rest, value);
	const isGone = next === undefined || (rest.length > 0 && isRecord(next) && isEmpty(next));
	const others = Object.fromEntries(Object.entries(record).filter(([key]) => key !== step));
	return isGone ? others : { ...others, [step]: next };
}

const isRecord = (value: unknown): value is Record<string, unknown> =>
	typeof value === 'object' && value !== null && !Array.isArray(value);
const isEmpty = (record: object) => Object.keys(record).length === 0;
