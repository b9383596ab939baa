import { goto } from '$app/navigation';

/** Keys of a list: J and K go from row to row, X chooses the row, / goes to the search, P pastes. */
export function listKeys({ paste }: { paste: string }) {
	return (event: KeyboardEvent): void => {
		if (event.ctrlKey || event.metaKey || event.altKey || isTyping(event.target)) return;
		const act = acts[event.key.toLowerCase()];
		if (event.key.toLowerCase() === 'p') void goto(paste);
		else if (act) act();
		else return;
		event.preventDefault();
	};
}

const acts: Record<string, () => void> = {
	j: () => step(1),
	k: () => step(-1),
	x: () => document.activeElement?.closest('tr')?.querySelector<HTMLElement>('input')?.click(),
	'/': () => document.querySelector<HTMLElement>('[data-find] input')?.focus()
};

function step(by: number): void {
	const rows = [...document.querySelectorAll<HTMLElement>('[data-row]')];
	const current = document.activeElement?.closest('tr')?.querySelector('[data-row]');
	const index = rows.findIndex((row) => row === current);
	rows[Math.min(rows.length - 1, Math.max(0, index + by))]?.focus();
}

function isTyping(target: EventTarget | null): boolean {
	if (!(target instanceof HTMLElement)) return false;
	const isText = target instanceof HTMLInputElement && target.type !== 'checkbox';
	return isText || target instanceof HTMLTextAreaElement || target instanceof HTMLSelectElement;
}
