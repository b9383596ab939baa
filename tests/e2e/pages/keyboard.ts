import type { Locator } from 'playwright-core';
import type { Hands } from './hands';
import { readStop } from './read-stop';

/** More than any page has: Tab comes round to the top of the page after its last stop. */
const stopLimit = 500;

/** Everything by keys. Every stop of Tab on the way must be seen to have the focus. */
export function createKeyboard(): Hands {
	return {
		goTo: reach,
		async press(control) {
			await reach(control);
			await control.page().keyboard.press('Enter');
		},
		async write(field, text) {
			await reach(field);
			const type = await field.getAttribute('type');
			if (type === 'date' || type === 'datetime-local') return writeDate(field, text);
			await field.page().keyboard.press('ControlOrMeta+a');
			// What has lines or tabs is pasted; Tab would leave the field.
			if (/[\n\t]/.test(text)) await field.page().keyboard.insertText(text);
			else await field.page().keyboard.type(text);
		},
		async pick(list, option) {
			await reach(list);
			const steps = await list.evaluate(countSteps, option);
			for (let step = 0; step < Math.abs(steps); step += 1) {
				await list.page().keyboard.press(steps > 0 ? 'ArrowDown' : 'ArrowUp');
			}
		},
		async tick(box, isOn = true) {
			await reach(box);
			if ((await box.isChecked()) !== isOn) await box.page().keyboard.press('Space');
		},
		async give(field, file) {
			await reach(field);
			const choosing = field.page().waitForEvent('filechooser');
			await field.page().keyboard.press('Space');
			await (await choosing).setFiles(file);
		}
	};
}

/**
 * Presses Tab, and inside a group of choices an arrow, until the control has the focus.
 *
 * @throws if it never does, or if a stop on the way cannot be seen
 */
async function reach(control: Locator): Promise<void> {
	const page = control.page();
	await control.waitFor({ state: 'attached' });
	const passed: string[] = [];
	for (let count = 0; count < stopLimit; count += 1) {
		const stop = await control.evaluate(readStop);
		// Where one stood before may have been pushed out of sight by what the page has said since.
		if (count > 0 && stop.unseen)
			throw new Error(`focus on “${stop.name}”, ${page.url()}: ${stop.unseen}`);
		if (stop.isHere && stop.mayAct) return;
		if (stop.isHere) await page.waitForTimeout(50);
		else await page.keyboard.press(stop.isSameGroup ? 'ArrowDown' : 'Tab');
		passed.push(stop.name);
	}
	throw new Error(`no key leads to ${control} on ${page.url()}, only to ${nameSome(passed)}`);
}

function nameSome(names: readonly string[]): string {
	return [...new Set(names)].slice(0, 60).join(' | ');
}

/** Runs in the page: how many options below the chosen one the wanted option stands. */
function countSteps(list: Element, option: string): number {
	if (!(list instanceof HTMLSelectElement)) throw new Error('not a list of options');
	const options = [...list.options].filter(({ disabled }) => !disabled);
	const wanted = options.findIndex(({ label }) => label.trim() === option);
	if (wanted < 0) throw new Error(`no option ${option}`);
	return wanted - options.findIndex(({ selected }) => selected);
}

/** Types the parts of a date, in the order and with the clock that this browser asks for. */
async function writeDate(field: Locator, text: string): Promise<void> {
	const { keyboard } = field.page();
	for (const keys of listSpellings(text)) {
		for (let part = 0; part < 6; part += 1) await keyboard.press('ArrowLeft');
		for (const part of keys) {
			await keyboard.type(part);
			// A whole day, month or hour goes on by itself, a year of four digits does not.
			if (part.length === 4) await keyboard.press('ArrowRight');
		}
		if ((await field.inputValue()) === text) return;
	}
	throw new Error(`${text} cannot be typed: the field says ${await field.inputValue()}`);
}

function listSpellings(text: string): string[][] {
	const [date = '', time = ''] = text.split('T');
	const [year = '', month = '', day = ''] = date.split('-');
	const [hour = '', minute = ''] = time.split(':');
	const twelve = String(((Number(hour) + 11) % 12) + 1).padStart(2, '0');
	const dates = [
		[day, month, year],
		[month, day, year]
	];
	if (!time) return dates;
	const times = [
		[hour, minute],
		[twelve, minute, Number(hour) < 12 ? 'A' : 'P']
	];
	return dates.flatMap((one) => times.map((other) => [...one, ...other]));
}
