/** What Tab came to, seen from the control that is looked for. */
export type Stop = {
	name: string;
	isHere: boolean;
	/** Another choice of the same group: arrows lead from one to the other. */
	isSameGroup: boolean;
	/** Why nobody sees that it has the focus; empty when one does. */
	unseen: '' | 'outside the window' | 'no ring';
	/** Whether the control that is looked for can be used now. */
	mayAct: boolean;
};

/** Runs in the page. It may name nothing outside itself. */
export async function readStop(wanted: Element): Promise<Stop> {
	const at = document.activeElement;
	const painted = () => new Promise((done) => requestAnimationFrame(done));
	const mayAct = !wanted.matches(':disabled') && wanted.getAttribute('aria-disabled') !== 'true';
	const nowhere = { name: '', isHere: false, isSameGroup: false, unseen: '', mayAct } as const;
	if (!(at instanceof HTMLElement) || at === document.body) return nowhere;
	const hasRing = (element: Element | null) => {
		if (!element) return false;
		const { outlineStyle, outlineWidth, boxShadow } = getComputedStyle(element);
		return (
			(outlineStyle !== 'none' && Number.parseFloat(outlineWidth) >= 1) || boxShadow !== 'none'
		);
	};
	const whyUnseen = () => {
		const box = at.getBoundingClientRect();
		const isInView =
			box.bottom > 0 && box.top < innerHeight && box.right > 0 && box.left < innerWidth;
		// The button inside a date field has the focus in the browser's own part of the page.
		const isInside = at.matches('input') && !at.matches(':focus');
		// A visit on the grid draws the ring on the piece that stands for it.
		const piece = at.querySelector('.piece');
		const around = [at, at.parentElement, at.nextElementSibling, at.closest('label'), piece];
		if (!isInView) return 'outside the window';
		return isInside || around.some(hasRing) ? '' : 'no ring';
	};
	for (let frame = 0; frame < 20 && whyUnseen() !== ''; frame += 1) await painted();
	const isSameGroup =
		at instanceof HTMLInputElement &&
		wanted instanceof HTMLInputElement &&
		at.type === 'radio' &&
		wanted.type === 'radio' &&
		at.name === wanted.name;
	const label = at.getAttribute('aria-label') ?? (at.innerText || at.getAttribute('name'));
	return {
		name: (label ?? at.tagName).replace(/\s+/g, ' ').trim().slice(0, 60),
		isHere: at === wanted,
		isSameGroup,
		unseen: whyUnseen(),
		mayAct
	};
}
