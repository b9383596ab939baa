import { drawNormal, drawUniform, type Uint32Stream } from '../random/random-stream.ts';
import type { PersonTraits } from './simulated-person.ts';

/** What a simulated person's movements are like. */
export type PersonStyle = 'explorer' | 'rigid' | 'round' | 'wide';

/** Middle values; distances in scaled units, startBias in tolerances. */
const STYLES: Record<PersonStyle, PersonTraits> = {
	explorer: makeStyle({ spreadAlong: 0.95, spreadAcross: 0.3, exploration: 0.5, escapeStep: 0.07 }),
	rigid: makeStyle({ spreadAlong: 0.9, spreadAcross: 0.3, exploration: 0.1, escapeStep: 0.003 }),
	round: makeStyle({ spreadAlong: 0.6, spreadAcross: 0.55, exploration: 0.4, escapeStep: 0.05 }),
	wide: makeStyle({ spreadAlong: 1.5, spreadAcross: 1.2, exploration: 0.5, escapeStep: 0.05 })
};

function makeStyle(
	own: Pick<PersonTraits, 'spreadAlong' | 'spreadAcross' | 'exploration' | 'escapeStep'>
): PersonTraits {
	return {
		preferredPlace: 0,
		noviceFactor: 1.6,
		learningTrials: 80,
		startBias: 0.5,
		errorPull: 0.12,
		...own
	};
}

/**
 * Traits of a simulated person of a style, each varied by chance.
 *
 * Shapes: stream, style and the task's tolerance in, traits out. Units: scaled; startBias in the
 * unit of the result.
 * Method: log-normal factors of about 12 % on sizes; place and bias normal.
 * Source: chosen for demonstrations, no data behind them.
 * Accuracy: none claimed; scheduler/learners/simulated-person.test.ts checks what the styles do.
 * @example drawTraits(stream, { style: 'explorer', tolerance: 0.12 })
 */
export function drawTraits(
	stream: Uint32Stream,
	{ style, tolerance }: { style: PersonStyle; tolerance: number }
): PersonTraits {
	const middle = STYLES[style];
	const vary = (value: number) => value * Math.exp(0.12 * drawNormal(stream));
	return {
		preferredPlace: 0.4 * drawNormal(stream),
		spreadAlong: vary(middle.spreadAlong),
		spreadAcross: vary(middle.spreadAcross),
		noviceFactor: 1 + vary(middle.noviceFactor - 1),
		learningTrials: vary(middle.learningTrials),
		startBias: tolerance * middle.startBias * drawNormal(stream),
		errorPull: vary(middle.errorPull),
		exploration: vary(middle.exploration),
		escapeStep: vary(middle.escapeStep)
	};
}

/** A style by lot: of ten people about six explore, two are rigid, two are round. */
export function drawStyle(stream: Uint32Stream): PersonStyle {
	const lot = drawUniform(stream);
	if (lot < 0.6) return 'explorer';
	return lot < 0.8 ? 'rigid' : 'round';
}
