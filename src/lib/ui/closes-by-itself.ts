/** Closes an open `details` after a choice in it, a press outside it, or Esc (focus goes back). */
export function closesByItself(details: HTMLDetailsElement): () => void {
	const close = () => (details.open = false);
	const onPress = (event: Event) => {
		const target = event.target;
		if (!(target instanceof Element)) return;
		if (!details.contains(target) || target.closest('a')) close();
	};
	const onKey = (event: KeyboardEvent) => {
		if (event.key !== 'Escape' || !details.open) return;
		close();
		details.querySelector('summary')?.focus();
	};
	const onFocusOut = (event: FocusEvent) => {
		const next = event.relatedTarget;
		if (next instanceof Node && !details.contains(next)) close();
	};
	document.addEventListener('click', onPress);
	details.addEventListener('keydown', onKey);
	details.addEventListener('focusout', onFocusOut);
	return () => {
		document.removeEventListener('click', onPress);
		details.removeEventListener('keydown', onKey);
		details.removeEventListener('focusout', onFocusOut);
	};
}
