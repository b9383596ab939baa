import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { createClock } from '$lib/server/clock';
import { openDatabase, type Database, type DatabaseHandle } from '$lib/server/db/client';
import { recordEvent, studyRole, task } from '$lib/server/db/schema';
import { keepTask } from '$lib/server/tasks/keep-task';
import { loadStudyTask } from '$lib/server/tasks/load-study-task';
import { loadTask, loadTasks } from '$lib/server/tasks/load-tasks';
import { createTaskDraft, writeTaskDraft, type TaskDraft } from '$lib/tasks/task-draft';
import { taskTypes } from '$lib/tasks/task-models';
import { exampleFormula } from '$lib/tasks/default-tasks';
import { createDatabase, type TestDatabase } from '../support/create-database';
import { plantEmptyLab, plantPerson, type PlantedPerson } from '../support/plant-person';
import { plantLab, plantStudy } from '../support/planted-study';
import { createPuckProtocol } from '../support/puck-protocol';

let database: TestDatabase;
let app: DatabaseHandle;
let owner: DatabaseHandle;
let db: Database;
const clock = createClock(0);
let labId: string;
let member: PlantedPerson;
const keep = () => member.grantFor('lab-task:keep', { labId });
const read = () => member.grantFor('lab:read', { labId });

beforeAll(async () => {
	database = await createDatabase();
	app = openDatabase(database.appUrl);
	owner = openDatabase(database.ownerUrl);
	db = app.db;
});
beforeEach(async () => {
	labId = await plantEmptyLab(owner.db);
	member = await plantPerson(owner.db, 'Mona Member', { labId });
});
afterAll(async () => {
	await app.end();
	await owner.end();
	await database.drop();
});

async function keepDraft(draft: TaskDraft, name: string, basedOn: number | null = null) {
	return keepTask(db, clock, await keep(), { name, note: 'as piloted', draft, basedOn });
}

describe('tasks of a lab', () => {
	test('every model is kept and comes back as it was', async () => {
		for (const type of taskTypes) {
			const draft = type === 'formula' ? writeTaskDraft(exampleFormula) : createTaskDraft(type);
			expect(await keepDraft(draft, `Our ${type}`)).toMatchObject({ ok: true, version: 1 });
		}
		const kept = await loadTasks(db, await read());
		expect(kept.map(({ record }) => record.type).toSorted()).toEqual([...taskTypes].toSorted());
		const puck = kept.find(({ record }) => record.type === 'puck');
		expect(puck && writeTaskDraft(puck.record)).toEqual(createTaskDraft('puck'));
		expect(puck).toMatchObject({ keptBy: 'Mona Member', note: 'as piloted' });
		expect(puck?.keptAtMs).toBeGreaterThan(0);
	});

	test('a change becomes the next version, and the first stays', async () => {
		const draft = createTaskDraft('puck');
		const first = await keepDraft(draft, 'Puck');
		const changed = { ...draft, tolerance: 0.1 };
		expect(await keepDraft(changed, 'Puck', 1)).toMatchObject({ ok: true, version: 2 });
		const all = await loadTasks(db, await read());
		expect(all.map(({ version, record }) => [version, record.tolerance])).toEqual([
			[2, 0.1],
			[1, 0.12]
		]);
		const one = first.ok ? await loadTask(db, await read(), first.id) : null;
		expect(one?.record.tolerance).toBe(0.12);
	});

	test('what is not a task, not new, or overtaken is refused with its reason', async () => {
		const draft = createTaskDraft('puck');
		const open = { ...draft, numbers: { ...draft.numbers, mu: null } };
		expect(await keepDraft(open, 'Puck')).toMatchObject({
			...{ ok: false, reason: 'unreadable', faults: [{ field: 'numbers.mu' }] }
		});
		expect(await keepDraft(draft, 'Puck', 1)).toEqual({ ok: false, reason: 'no-such-task' });
		await keepDraft(draft, 'Puck');
		expect(await keepDraft(draft, 'Puck')).toEqual({ ok: false, reason: 'name-taken' });
		expect(await keepDraft(draft, 'Puck', 1)).toEqual({ ok: false, reason: 'nothing-changed' });
		await keepDraft({ ...draft, tolerance: 0.1 }, 'Puck', 1);
		expect(await keepDraft({ ...draft, tolerance: 0.2 }, 'Puck', 1)).toEqual({
			...{ ok: false, reason: 'stale', newest: 2 }
		});
	});

	test('two people who keep the same version at once get one version and one refusal', async () => {
		const draft = createTaskDraft('puck');
		await keepDraft(draft, 'Puck');
		const answers = await Promise.all(
			[0.1, 0.2].map((tolerance) => keepDraft({ ...draft, tolerance }, 'Puck', 1))
		);
		expect(answers.map(({ ok }) => ok).toSorted()).toEqual([false, true]);
		expect(answers.find(({ ok }) => !ok)).toMatchObject({ reason: 'stale', newest: 2 });
	});

	test('another lab sees none of them', async () => {
		const kept = await keepDraft(createTaskDraft('puck'), 'Puck');
		const otherId = await plantEmptyLab(owner.db, 'Harbour Lab');
		const other = await plantPerson(owner.db, 'Otto Other', { labId: otherId });
		const grant = await other.grantFor('lab:read', { labId: otherId });
		expect(await loadTasks(db, grant)).toEqual([]);
		expect(await loadTask(db, grant, kept.ok ? kept.id : randomUUID())).toBeNull();
		await expect(other.grantFor('lab-task:keep', { labId })).rejects.toMatchObject({ status: 404 });
	});

	test('the database refuses to change or delete a version', async () => {
		const kept = await keepDraft(createTaskDraft('puck'), 'Puck');
		const id = kept.ok ? kept.id : '';
		const refused = { cause: { code: '42501' } };
		await expect(db.update(task).set({ name: 'x' }).where(eq(task.id, id))).rejects.toMatchObject(
			refused
		);
		await expect(db.delete(task).where(eq(task.id, id))).rejects.toMatchObject(refused);
	});

	test('keeping one is entered in the record', async () => {
		await keepDraft(createTaskDraft('arm-x'), 'Reach');
		const [event] = await owner.db.select().from(recordEvent).where(eq(recordEvent.labId, labId));
		expect(event).toMatchObject({ kind: 'task-kept', actorId: member.id });
		expect(event?.body).toContain('"model":"arm-x"');
	});
});

describe('task of a study', () => {
	test('is that of the frozen version for who may not write the draft', async () => {
		const planted = await plantStudy(owner.db, await plantLab(owner.db), {
			content: createPuckProtocol()
		});
		const reader = await plantPerson(owner.db, 'Stina Statistician', { labId: planted.labId });
		await owner.db.insert(studyRole).values({
			...{ studyId: planted.studyId, personId: reader.id, role: 'statistician' },
			givenBy: reader.id
		});
		const grant = await reader.grantFor('task:read', { studyId: planted.studyId });
		const { task: shown, hasUnreadableDraft } = await loadStudyTask(db, grant);
		expect(shown).toMatchObject({ from: 'frozen' });
		expect(shown?.record.type).toBe('puck');
		expect(hasUnreadableDraft).toBe(false);
	});
});
