import { z } from 'zod';
import { createSwingTable } from '../../../../tasks/models/tether/nearest-pass.ts';
import { tetheredBallRecordSchema } from '../../../../tasks/models/tether/tether-record.ts';
import {
	computeTetherAlignment,
	solveUndampedSpeeds
} from '../../../../tasks/models/tether/tether-facts.ts';
import {
	computeSwingWeights,
	createTetherSwing,
	placeAt,
	type TetherSwing
} from '../../../../tasks/models/tether/tether-swing.ts';
import {
	createTetheredBall,
	followThrow,
	type TetherPass
} from '../../../../tasks/models/tether/tethered-ball.ts';
import { answerEach } from '../../each-of.ts';
import { firstOf, forInputs, HOW_CHECKED, listSchema } from '../../topic.ts';

/** The model as cases write it; damping c in N·s/m. */
export const tetherInputs = z.strictObject({
	m: z.number().positive(),
	k: z.number().positive(),
	c: z.number().nonnegative().default(0),
	px: z.number(),
	py: z.number(),
	l: z.number().positive(),
	tx: z.number(),
	ty: z.number(),
	Rpost: z.number().nonnegative().default(0),
	rball: z.number().nonnegative().default(0),
	penalty: z.number().positive().default(0.5),
	post_hit_mode: z.enum(['penalty', 'truncate']).default('penalty'),
	window_s: z.number().positive().optional()
});

const throws = tetherInputs.extend({ alpha_deg: listSchema, v: listSchema });
const angles = tetherInputs.extend({ alpha_deg: listSchema });

const RAD_PER_DEG = Math.PI / 180;

export function toTetherRecord(inputs: z.output<typeof tetherInputs>) {
	const { m, k, c, px, py, l, tx, ty, Rpost, rball, penalty } = inputs;
	return tetheredBallRecordSchema.parse({
		...{ type: 'tethered-ball', m, k, arm: l, pivot: [px, py], target: [tx, ty] },
		...{ postRadius: Rpost, ballRadius: rball, postPenalty: penalty },
		...{ postHit: inputs.post_hit_mode, window: inputs.window_s ?? null },
		relaxationTime: c === 0 ? null : (2 * m) / c,
		tolerance: penalty / 10
	});
}

/** Cases take the least distance from the center over even samples of the window, up to the pass. */
const CENTER_SAMPLES = 4000;

function sampleCenterDistance(swing: TetherSwing, { launch, time }: TetherPass): number {
	let least = Number.POSITIVE_INFINITY;
	for (let i = 0; i <= CENTER_SAMPLES; i++) {
		const t = (swing.window * i) / CENTER_SAMPLES;
		if (t > time) break;
		least = Math.min(least, Math.hypot(...placeAt(launch, computeSwingWeights(swing, t))));
	}
	return least;
}

/** Cases of the tethered ball: throws, and speeds that hit from given angles. */
export const TETHER_TOPIC = firstOf(
	forInputs(throws, ({ alpha_deg, v, ...model }) => {
		const record = toTetherRecord(model);
		const table = createSwingTable(createTetherSwing(record));
		const task = createTetheredBall(record);
		const alignment = computeTetherAlignment(record);
		const passes = answerEach({ alpha_deg, v }, (one) => {
			const pass = followThrow(record, table, one.alpha_deg * RAD_PER_DEG, one.v);
			const [perDeg = Number.NaN, bySpeed = Number.NaN] = task.gradient([one.alpha_deg, one.v]);
			const slopes = [perDeg / RAD_PER_DEG, bySpeed];
			return {
				distance: pass.distance,
				t_closest: pass.time,
				signed: pass.signed,
				post_hit: pass.postTime !== null,
				result: Math.abs(task.evaluate([one.alpha_deg, one.v])),
				min_centre_distance: sampleCenterDistance(table.swing, pass),
				t_post: pass.postTime,
				d_signed_d_alpha_per_rad: slopes[0],
				d_signed_d_v: slopes[1],
				jacobian: slopes,
				finite_difference_of_ode: slopes
			};
		});
		return {
			...passes,
			t_pass: alignment.passTime,
			alignment_value: alignment.number,
			alpha_star_deg: alignment.freeAngleDeg,
			alignment_identity: HOW_CHECKED,
			ode_distance: HOW_CHECKED,
			closed_form_minus_ode: HOW_CHECKED
		};
	}),
	forInputs(angles, ({ alpha_deg, ...model }) => {
		if (model.c !== 0) return undefined;
		const record = toTetherRecord(model);
		return answerEach({ alpha_deg }, (one) => {
			const solved = solveUndampedSpeeds(record, one.alpha_deg * RAD_PER_DEG);
			const { speed, time } = solved.ok ? solved.solutions[0] : { speed: null, time: null };
			return { v: speed, t: time, exists: solved.ok };
		});
	})
);
