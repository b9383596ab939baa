import type { Locator } from 'playwright-core';
import { createKeyboard } from './keyboard';

export type Upload = { name: string; mimeType: string; buffer: Buffer };

/** How somebody works a control: with a pointer, or with a keyboard and nothing else. */
export type Hands = {
	/** Goes to a control and does nothing with it yet. */
	goTo(control: Locator): Promise<void>;
	/** Presses a button, follows a link, opens or shuts a summary. */
	press(control: Locator): Promise<void>;
	/** Writes over what stands in a field. */
	write(field: Locator, text: string): Promise<void>;
	/** Chooses an option of a list by its label. */
	pick(list: Locator, option: string): Promise<void>;
	/** Ticks a box or a choice, or takes the tick away. */
	tick(box: Locator, isOn?: boolean): Promise<void>;
	/** Chooses a file of one's own. */
	give(field: Locator, file: Upload): Promise<void>;
};

export type HandsKind = 'pointer' | 'keyboard';

const pointer: Hands = {
	goTo: (control) => control.focus(),
	press: (control) => control.click(),
	write: (field, text) => field.fill(text),
	pick: async (list, option) => void (await list.selectOption({ label: option })),
	tick: (box, isOn = true) => box.setChecked(isOn),
	give: (field, file) => field.setInputFiles(file)
};

export function createHands(kind: HandsKind): Hands {
	return kind === 'pointer' ? pointer : createKeyboard();
}
