import { spawnSync } from 'node:child_process';
import { writeFileSync } from 'node:fs';
import { join, resolve } from 'node:path';
import { describe, expect, it } from 'vitest';
import { describeKind } from '$lib/decisions/kind-words';
import { listDecisions, openDecision } from '../pages/decision-pages';
import { moveClock } from '../pages/demo-clock';
import { expectDecision } from '../pages/puck-trials';
import { fetchBlock } from '../pages/visit-pages';
import { desks, everybody, journey, steady, thursday, wednesday } from './world';

const checkout = resolve(import.meta.dirname, '../../..');

export function decideAndRun() {
	describe('steps 6 to 8: allocated, decided, settled, run', () => {
		it('everybody gets a decision; in the adaptive arm it is the expected one', async () => {
			const { approver } = desks;
			await approver.open(`${journey.study}/decisions`);
			const next = async () => {
				await approver.page.reload();
				return (await listDecisions(approver)).filter(({ place }) => place.startsWith('visit 2'));
			};
			await expect
				.poll(async () => (await next()).length, { timeout: 60_000, interval: 1000 })
				.toBe(everybody.length);
			await approver.keep('60-decisions');
			const found = new Map((await next()).map((row) => [row.code, row]));
			const adaptive = everybody.filter(({ code }) => found.get(code)?.reason !== 'PROTOCOL-BLOCK');
			for (const { code, like } of adaptive) {
				const { kind, code: reason } = expectDecision(like);
				expect(found.get(code)).toMatchObject({ kind: describeKind(kind), reason });
			}
			const isAdaptive = new Set(adaptive.map(({ code }) => code));
			journey.held = steady.map(({ code }) => code).filter((code) => isAdaptive.has(code));
			expect(journey.held.length).toBeGreaterThanOrEqual(4);
			expect(adaptive.length).toBeLessThan(everybody.length);
		});

		it('the approver reads cloud, ladder and reasons, and uses one as proposed', async () => {
			const { approver } = desks;
			await openDecision(approver, journey.held[0] ?? '');
			await approver.see('Held, not automatic:');
			await approver.see('How it was chosen');
			await approver.keep('61-decision');
			await approver.press('Use this block');
			await approver.see('Used as proposed');
		});

		it('changes one with a reason', async () => {
			const { approver } = desks;
			await openDecision(approver, journey.held[1] ?? '');
			await approver.press('Change and say why');
			await approver.see(/Say why, in a sentence/);
			await approver.fill('Why', 'Tired today: a smaller region is enough.');
			await approver.fill(/^Size of the region/, '70');
			await approver.press('Change and say why');
			await approver.see('Tired today: a smaller region is enough.');
			await approver.see('Changed');
			await approver.keep('62-changed');
		});

		it('runs plain practice instead of one', async () => {
			const { approver } = desks;
			await openDecision(approver, journey.held[2] ?? '');
			await approver.fill('Why', 'A sore shoulder: plain practice this time.');
			await approver.press('Run plain practice');
			await approver.see('Plain practice instead');
		});

		it('the operator sees “not yet” the day before', async () => {
			const { operator } = desks;
			await moveClock(operator, `${wednesday}T08:00`);
			await operator.open(`${journey.study}/visits`);
			await operator.see(/block 1: not yet, from Wed/);
			for (const { code } of steady) {
				expect(await operator.link(`fetch its file of ${code}, visit 2, block 1`).count()).toBe(0);
			}
			await operator.keep('63-not-yet');
		});

		it('and “ready” in both arms once the hour has come', async () => {
			const { operator } = desks;
			await moveClock(operator, `${thursday}T04:30`);
			await operator.open(`${journey.study}/visits`);
			for (const { code } of steady) {
				await operator.link(`fetch its file of ${code}, visit 2, block 1`).waitFor();
			}
			await operator.keep('64-ready');
		});

		it('the rig opens its block, and refuses that of another visit or person', async () => {
			const { operator } = desks;
			const code = journey.held[0] ?? '';
			const block = await fetchBlock(operator, code, 2);
			expect(block.name).toContain(code);
			writeFileSync(join(journey.folder, 'block.jwe'), block.text);
			const open = (person: string, visit: string) =>
				spawnSync(
					'/usr/bin/python3',
					[
						join(checkout, 'static/examples/open_block.py'),
						join(journey.folder, 'block.jwe'),
						...[
							'--rig-key',
							join(journey.folder, 'rig.json'),
							'--server-key',
							join(journey.folder, 'server.json')
						],
						...['--participant', person, '--visit', visit, '--block', '1'],
						...['--now', `${thursday}T08:00:00Z`]
					],
					{ encoding: 'utf8' }
				);
			const opened = open(code, '2');
			expect(opened.stderr).toBe('');
			expect(JSON.parse(opened.stdout)).toMatchObject({
				participant: code,
				visit: 2,
				plan: { kind: 'region' }
			});
			expect(open(code, '3').stderr).toContain('refused: it is for visit 2, not 3');
			expect(open('Q00', '2').status).toBe(1);
		});

		it('files of every person have one size', async () => {
			const { operator } = desks;
			const sizes = new Set<number>();
			for (const { code } of steady) {
				sizes.add((await fetchBlock(operator, code, 2)).text.length);
			}
			expect(sizes.size).toBe(1);
		});

		it('what was left got the declared fallback', async () => {
			const { approver } = desks;
			await openDecision(approver, journey.held[3] ?? '');
			await approver.see('The fallback runs: plain practice');
			await approver.keep('65-fallback');
		});

		it('every decision replays to the same bytes, from the page and the command line', async () => {
			const { approver } = desks;
			await approver.press('Replay this decision from the record');
			await approver.see('Replays to the same bytes');
			await approver.section('Decisions');
			await approver.press('Replay all from the record');
			await approver.see(/(\d+) of \1 decisions replay to the same bytes/);
			await approver.keep('66-replay');
			const replayed = spawnSync(process.execPath, [join(checkout, 'build/workers/replay.js')], {
				env: { ...process.env, ...journey.app.environment },
				encoding: 'utf8'
			});
			expect(replayed.stdout).toMatch(/: (\d+) of \1 decisions replay to the same bytes/);
			expect(replayed.status).toBe(0);
		});

		it('the investigator finds no decisions, only counts', async () => {
			const reply = await desks.investigator.open(`${journey.study}/decisions`);
			expect(reply?.status()).toBe(404);
			await desks.investigator.keep('67-investigator');
		});
	});
}
