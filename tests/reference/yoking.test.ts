import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { findYokedBlock } from '../../scheduler/policies/yoking/find-yoked-block.ts';
import { computeMatchDistance } from '../../scheduler/policies/yoking/match-people.ts';
import { yokedRuleSchema } from '../../scheduler/policies/yoking/yoked-rule.ts';

/** Random states; expected answers by the method sheet's own prototype, see data/README-engine.md. */
const block = z
	.object({ scored_at_h: z.number().nullable(), kind: z.string(), parameters: z.looseObject({}) })
	.transform(({ scored_at_h, ...rest }) => ({ scoredAtHours: scored_at_h, ...rest }));
const file = z
	.object({
		next: z.array(
			z.object({
				...{ k: z.number(), now_h: z.number(), gap_max_h: z.number() },
				master: z.object({ blocks: z.array(block), withdrawn: z.boolean() }),
				last: z.object({
					previous_end_h: z.number(),
					kind: z.enum(['region', 'shift']).optional(),
					parameters: z.looseObject({}).optional()
				}),
				rules: z.object({ leadHours: z.number(), orphan: z.string(), late: z.string() }),
				pool: z.array(z.object({ id: z.string(), distance: z.number(), blocks: z.array(block) })),
				expected: z.looseObject({ action: z.string(), code: z.string() })
			})
		),
		distances: z.array(
			z.object({
				a: z.object({ log_volume: z.number(), mean_error: z.number() }),
				b: z.object({ log_volume: z.number(), mean_error: z.number() }),
				...{ sd_logvol: z.number(), sd_error: z.number(), expected: z.number() }
			})
		)
	})
	.parse(JSON.parse(readFileSync(new URL('data/yoked-cases.json', import.meta.url), 'utf8')));

describe('the next block of a yoked partner', () => {
	it.each(file.next.map((example, i) => [i + 1, example.expected.code, example] as const))(
		'state %d: %s as the prototype',
		(_number, _code, example) => {
			const { k, now_h, master, last, rules, gap_max_h, pool, expected } = example;
			const rule = yokedRuleSchema.parse({
				...{ kind: 'yoked', settings: rules, block: k, nowHours: now_h, gapMaxHours: gap_max_h },
				previousEndHours: last.previous_end_h,
				master: { code: 'M', ...master },
				pool: pool.map(({ id, ...rest }) => ({ code: id, ...rest }))
			});
			const level = last.kind ? { kind: last.kind, parameters: last.parameters ?? {} } : null;
			const got = findYokedBlock(rule, level);
			expect([got.action, got.code]).toEqual([expected.action, expected.code]);
			if (got.action === 'wait') {
				expect(got.untilHours).toBeCloseTo(Number(expected['until_h']), 9);
				return;
			}
			expect(got).toMatchObject({ kind: expected['kind'], parameters: expected['parameters'] });
			if (expected.code === 'RE-PAIRED') expect(got.master).toBe(expected['master']);
			if (expected.code === 'YOKED')
				expect((got.leadHours ?? 0) >= rules.leadHours).toBe(expected['lead_kept']);
		}
	);
});

describe('the matching distance', () => {
	it('is the prototype’s', () => {
		for (const { a, b, sd_logvol, sd_error, expected } of file.distances) {
			const traits = (x: typeof a) => ({ logVolume: x.log_volume, meanError: x.mean_error });
			const scales = { logVolumeSd: sd_logvol, meanErrorSd: sd_error };
			expect(computeMatchDistance(traits(a), traits(b), scales)).toBeCloseTo(expected, 12);
		}
	});
});
