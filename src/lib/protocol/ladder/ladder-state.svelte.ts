import type { DraftEditor } from '../draft-editor.svelte';
import { hasOwnList } from '../edit/block-lists';
import { insertBlocks, type InsertPlace } from '../edit/blocks';
import type { ProtocolDraft } from '../protocol-draft';
import { visitName } from '../visit-name';
import type { Clip } from './clip';
import {
	blocksAt,
	clampSpot,
	editedPlace,
	isBlockSpot,
	refsOf,
	spotsBetween,
	stepSpot,
	type Direction,
	type Scope,
	type Spot
} from './spots';

/** Where somebody stands in the ladder, what they chose, and what the last act did. */
export class LadderState {
	readonly editor: DraftEditor;
	/** The one place that Tab reaches. */
	spot: Spot = $state.raw({ arm: 0, visit: 0, block: 0 });
	/** Blocks chosen beside the one that one stands at; empty while only that one is meant. */
	chosen: readonly Spot[] = $state.raw([]);
	scope: Scope = $state('arm');
	/** What the last act did, read out. */
	message = $state('');
	/** Whether the form of what one stands at is open below. */
	isEditing = $state(false);
	/** Grows whenever that form should get the focus. */
	editCount = $state(0);
	clip: Clip | null = $state.raw(null);
	/** Rows of a spreadsheet that wait to be looked at; empty: they are asked for. */
	pasted: string | null = $state(null);
	isTable = $state(false);
	/** Where a picked-up piece would be put down. */
	drop: Spot | null = $state.raw(null);
	/** Where the pointer is that holds a piece. */
	held: { x: number; y: number } | null = $state.raw(null);
	/** Grows whenever the place that one stands at should get the focus. */
	focusCount = $state(0);
	#anchor: Spot | null = null;

	constructor(editor: DraftEditor) {
		this.editor = editor;
	}

	get draft(): ProtocolDraft {
		return this.editor.draft;
	}

	/** The blocks that an act is about. */
	get spots(): readonly Spot[] {
		if (this.chosen.length > 0) return this.chosen;
		return isBlockSpot(this.spot) && blocksAt(this.draft, this.spot).length > 0 ? [this.spot] : [];
	}

	get refs() {
		return refsOf(this.draft, this.spots, this.scope);
	}

	stand(spot: Spot, { focus = true } = {}): void {
		this.spot = clampSpot(this.draft, spot);
		this.chosen = [];
		this.#anchor = null;
		if (focus) this.focusCount += 1;
	}

	step(direction: Direction): void {
		this.stand(stepSpot(this.draft, this.spot, direction));
	}

	/** Walks, and chooses everything from where the walk began. */
	stretch(direction: Direction): void {
		this.stretchTo(stepSpot(this.draft, this.spot, direction));
	}

	stretchTo(spot: Spot): void {
		const anchor = this.#anchor ?? this.spot;
		if (!isBlockSpot(spot) || spot.arm !== anchor.arm) return;
		this.spot = spot;
		this.#anchor = anchor;
		this.chosen = spotsBetween(this.draft, anchor, spot);
		this.focusCount += 1;
		this.say(`${this.chosen.length} blocks chosen`);
	}

	/** Takes a block into what is chosen, or out of it. */
	toggle(spot: Spot): void {
		const others = this.spots.filter(
			({ arm, visit, block }) => arm !== spot.arm || visit !== spot.visit || block !== spot.block
		);
		this.chosen = others.length === this.spots.length ? [...others, spot] : others;
		this.spot = spot;
		this.#anchor = spot;
		this.focusCount += 1;
	}

	edit(): void {
		this.isEditing = true;
		this.editCount += 1;
	}

	endEdit(): void {
		this.isEditing = false;
		this.focusCount += 1;
	}

	/** Back or forth in the history of the whole draft, staying in the ladder. */
	goBack(way: 'undo' | 'redo'): void {
		const label = way === 'undo' ? this.editor.undoLabel : this.editor.redoLabel;
		this.editor[way]();
		this.stand(this.spot);
		if (label !== null) this.say(`${way === 'undo' ? 'Taken back' : 'Done again'}: ${label}.`);
	}

	chooseVisit(): void {
		if (!isBlockSpot(this.spot)) return;
		const { arm, visit } = this.spot;
		this.chosen = blocksAt(this.draft, this.spot).map((_, block) => ({ arm, visit, block }));
	}

	say(message: string): void {
		this.message = message;
	}

	/** Does an act and says what came of it; `after` is where one stands then. */
	act(
		edit: (draft: ProtocolDraft) => ProtocolDraft,
		label: string,
		{ after, done, refused }: { after?: Spot; done?: string; refused?: string } = {}
	): boolean {
		const before = this.editor.snapshot;
		const isDone = this.editor.apply(edit, label);
		if (!isDone) this.say(refused ?? 'Nothing to change there.');
		else {
			this.say(this.#tellOwnList(before) ?? done ?? `Done: ${label}.`);
			this.stand(after ?? this.spot);
		}
		return isDone;
	}

	insert(place: InsertPlace, blocks: Parameters<typeof insertBlocks>[2], label: string): void {
		const { arm, visit } = this.spot;
		const isDone = this.act((draft) => insertBlocks(draft, place, blocks), label, {
			after: { arm, visit, block: place.index },
			refused: 'A visit has at most 40 blocks.'
		});
		if (isDone && blocks.length > 1) {
			this.chosen = blocks.map((_, at) => ({ arm, visit, block: place.index + at }));
		}
	}

	/** The list that an edit here changes. */
	get place() {
		return editedPlace(this.draft, this.spot, this.scope);
	}

	/** That an arm got blocks of its own just now; null when none did. */
	#tellOwnList(before: ProtocolDraft): string | null {
		const { arms, visits } = this.draft;
		for (const [index, visit] of visits.entries()) {
			const old = before.visits[index];
			if (visit === old || visits.length !== before.visits.length) continue;
			const arm = arms.find(({ key }) => hasOwnList(visit, key) && !hasOwnList(old, key));
			if (!arm) continue;
			const place = visitName(visit, index);
			return `${arm.name || arm.key} has blocks of its own on ${place} now; = makes them those of every arm again.`;
		}
		return null;
	}
}
