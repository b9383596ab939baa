import { checkNumber, faultAt, type Fault } from '../fault';
import { hasAdaptiveTime } from '../has-adaptive-time';
import type { ProtocolDraft } from '../protocol-draft';
import type { PolicyField } from './policy-field';
import { policyGroups } from './policy-groups';
import { getPolicyDefault, getPolicyValue } from './policy-values';

/** Path of a setting's field in the form and in faults. */
export const settingField = (path: string) => `policy.${path}`;

/** What was typed into the settings of the policy and cannot be; empty settings take the default. */
export function findSettingFaults(draft: ProtocolDraft): Fault[] {
	if (!hasAdaptiveTime(draft)) return [];
	const fields = policyGroups.flatMap(({ title, fields }) =>
		fields.flatMap((field) => checkSetting(field, getPolicyValue(draft, field.path), title))
	);
	return [...fields, ...findOrderFaults(draft)];
}

function checkSetting(field: PolicyField, value: unknown, title: string): Fault[] {
	if (value === undefined || (value === null && field.kind === 'optional-number')) return [];
	const where = { place: `Policy, ${title}`, field: settingField(field.path) };
	if (field.kind === 'flag' || field.kind === 'choice') return [];
	const number = (one: number | null) =>
		checkNumber({
			...{ ...where, value: one, name: field.label, min: field.min, max: field.max },
			...(field.unit ? { unit: field.unit } : {}),
			...(field.isWhole ? { isWhole: true } : {})
		});
	if (field.kind !== 'list') return number(typeof value === 'number' ? value : null);
	if (!Array.isArray(value)) {
		const text = `${field.label}: “${String(value)}” is no list of numbers.`;
		return [faultAt('list-unreadable', where, text, 'Write numbers with spaces between them.')];
	}
	if (value.length > field.most || (value.length === 0 && !field.mayBeEmpty)) {
		const least = field.mayBeEmpty ? 0 : 1;
		const text = `${field.label}: ${value.length} numbers.`;
		return [faultAt('list-length', where, text, `Write ${least} to ${field.most} numbers.`)];
	}
	return value.flatMap((one) => number(typeof one === 'number' ? one : null)).slice(0, 1);
}

/** Pairs of settings of which one must not exceed the other. */
const orders = [
	['place.reachMinSd', 'place.reachMaxSd', 'reach-order', 'Nearest and farthest way out'],
	['band.q1', 'band.q2', 'band-order', 'The quantile for suspect and for changed'],
	['shift.rule.holdMin', 'shift.rule.holdMax', 'hold-order', 'First look and longest hold']
] as const;

function findOrderFaults(draft: ProtocolDraft): Fault[] {
	return orders.flatMap(([low, high, code, names]) => {
		const [least, most] = [low, high].map((path) => numberAt(draft, path));
		if (least === undefined || most === undefined || least <= most) return [];
		const where = { place: 'Policy', field: settingField(low) };
		const text = `${names} are ${least} and ${most}.`;
		return [faultAt(code, where, text, 'Let the first not exceed the second.')];
	});
}

function numberAt(draft: ProtocolDraft, path: string): number | undefined {
	const value = getPolicyValue(draft, path) ?? getPolicyDefault(path);
	return typeof value === 'number' ? value : undefined;
}
