import { describe, expect, it } from 'vitest';
import { changeBlocks } from '../edit/blocks';
import { createPatternDraft } from '../patterns';
import { editedPlace, refsOf, spotsBetween, stepSpot, type Direction, type Spot } from './spots';

const draft = createPatternDraft('two-arms');
const at = (arm: number, visit: number, block: number): Spot => ({ arm, visit, block });
const walk = (start: Spot, ...steps: Direction[]) =>
	steps.reduce((spot, step) => stepSpot(draft, spot, step), start);

describe('walking the ladder', () => {
	it('goes down through the blocks into the next arm, and up to the head of the visit', () => {
		expect(walk(at(0, 0, 0), 'down', 'down')).toEqual(at(1, 0, 0));
		expect(walk(at(1, 0, 0), 'up')).toEqual(at(0, 0, 1));
		expect(walk(at(0, 0, 1), 'up', 'up')).toEqual(at(-1, 0, 0));
		expect(walk(at(1, 7, 0), 'down')).toEqual(at(1, 7, 0));
	});

	it('goes to the head of the arm at the left edge, and stays at the right one', () => {
		expect(walk(at(1, 0, 1), 'left')).toEqual(at(1, -1, 0));
		expect(walk(at(1, -1, 0), 'up', 'up', 'right')).toEqual(at(0, 0, 0));
		expect(walk(at(0, 7, 0), 'right')).toEqual(at(0, 7, 0));
	});

	it('stays inside shorter visits', () => {
		expect(walk(at(0, 6, 3), 'right')).toEqual(at(0, 7, 0));
		expect(walk(at(0, 1, 3), 'armDown')).toEqual(at(1, 1, 3));
		expect(walk(at(-1, 0, 0), 'left', 'up')).toEqual(at(-1, 0, 0));
	});

	it('chooses everything between two places of one arm', () => {
		const chosen = spotsBetween(draft, at(0, 2, 1), at(0, 1, 2));
		expect(chosen).toEqual([at(0, 1, 2), at(0, 1, 3), at(0, 2, 0), at(0, 2, 1)]);
	});
});

describe('what an edit changes', () => {
	it('is the arm’s own list, or that of every arm', () => {
		expect(editedPlace(draft, at(1, 2, 0), 'arm')).toEqual({ visit: 2, arm: 'fixed' });
		expect(editedPlace(draft, at(1, 2, 0), 'every')).toEqual({ visit: 2, arm: null });
	});

	it('is the arm’s own list wherever it has one', () => {
		const [ref] = refsOf(draft, [at(1, 2, 0)], 'arm');
		const own = changeBlocks(draft, ref ? [ref] : [], { trials: 50 });
		expect(editedPlace(own, at(1, 2, 0), 'every')).toEqual({ visit: 2, arm: 'fixed' });
		expect(editedPlace(own, at(0, 2, 0), 'every')).toEqual({ visit: 2, arm: null });
	});

	it('is the one list in a study of one arm', () => {
		const alone = createPatternDraft('blank');
		expect(editedPlace(alone, at(0, 0, 0), 'arm')).toEqual({ visit: 0, arm: null });
	});
});
