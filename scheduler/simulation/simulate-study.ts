import type { DecisionKind } from '../policies/policy-memory.ts';
import { drawNormal } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { createTask } from '../tasks/create-task.ts';
import { simulatePerson, type SimulatedPerson } from './simulate-person.ts';
import type { SimulatedGroup, StudySettings } from './simulation-settings.ts';

/** One letter a decision; capitals are what a person in the lab would notice. */
export const KIND_LETTERS: Readonly<Record<DecisionKind, string>> = {
	...{ baseline: 'b', practice: 'P', region: 'R', shift: 'S', probe: 'p', washout: 'w' },
	...{ retention: 't', recovery: 'r', maintenance: 'M', clamp: 'c', transfer: 'x' },
	...{ rest: '-', stop: '.', hold: 'H', wait: '…' }
};

export interface GroupReport {
	readonly name: string;
	/** Share of decisions of each kind, over all people. */
	readonly kindShares: Partial<Record<DecisionKind, number>>;
	/** Each person's course, one letter a decision. */
	readonly sequences: readonly string[];
	readonly escapesMean: number;
	/** Share of people who held the shift at its goal, and whose shift was frozen. */
	readonly heldShare: number;
	readonly frozenShare: number;
	/** Mean error of the first and the last plain block. */
	readonly firstError: number | null;
	readonly lastError: number | null;
}

export interface StudyReport {
	readonly groups: readonly GroupReport[];
	readonly people: readonly (SimulatedPerson & { group: string })[];
}

/**
 * A whole study of model learners under the policy that would run it, group by group.
 *
 * Method:  each person has a stream of their own (a jump of the seed), so that nobody's course depends on
 *          who else is simulated, in which order or by whom.
 * Source:  method sheet C, D0 (Closed loop). Accuracy: simulate-study.test.ts.
 * @example simulateStudy(studySettingsSchema.parse({ task, groups: [{ name: 'explorers', traits }] }))
 */
export function simulateStudy(settings: StudySettings): StudyReport {
	let number = 0;
	const people = settings.groups.flatMap((group) =>
		Array.from({ length: group.count }, () => ({
			group: group.name,
			...simulateOne(settings, group, number++)
		}))
	);
	const groups = settings.groups.map(({ name }) =>
		describeGroup(
			name,
			people.filter(({ group }) => group === name)
		)
	);
	return { groups, people };
}

/** Person number `number` of the study, by itself: for work that is spread over several workers. */
export function simulateOne(
	settings: StudySettings,
	group: SimulatedGroup,
	number: number
): SimulatedPerson {
	const { task: record, protocol, days, blocksPerDay, gapHours, seed } = settings;
	const stream = createSeededStream(seed, number);
	const middle = group.place ?? record.variables.map(() => 0);
	const place = middle.map((value) => value + group.placeSd * drawNormal(stream));
	return simulatePerson({
		...{ task: createTask(record), settings: protocol, traits: group.traits, place, stream },
		...{ days, blocksPerDay, gapHours }
	});
}

function describeGroup(name: string, people: readonly SimulatedPerson[]): GroupReport {
	const all = people.flatMap(({ decisions }) => decisions);
	const kinds = [...new Set(all.map(({ kind }) => kind))].sort();
	const shareOf = (isSo: (person: SimulatedPerson) => boolean) =>
		people.filter(isSo).length / people.length;
	return {
		name,
		kindShares: Object.fromEntries(
			kinds.map((kind) => [kind, all.filter((found) => found.kind === kind).length / all.length])
		),
		sequences: people.map(({ decisions }) =>
			decisions.map(({ kind }) => KIND_LETTERS[kind]).join('')
		),
		escapesMean: people.reduce((sum, { done }) => sum + done.escapes, 0) / people.length,
		heldShare: shareOf(({ done }) => done.held),
		frozenShare: shareOf(({ done }) => done.frozen),
		firstError: averagePlain(people, (plain) => plain[0]),
		lastError: averagePlain(people, (plain) => plain.at(-1))
	};
}

function averagePlain(
	people: readonly SimulatedPerson[],
	pick: (errors: readonly number[]) => number | undefined
): number | null {
	const errors = people.flatMap(({ decisions }) => {
		const plain = decisions.flatMap(({ kind, meanError }) =>
			kind === 'practice' || kind === 'baseline' ? (meanError ?? []) : []
		);
		return pick(plain) ?? [];
	});
	return errors.length > 0 ? errors.reduce((sum, error) => sum + error, 0) / errors.length : null;
}
