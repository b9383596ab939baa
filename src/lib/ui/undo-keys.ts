type Ways = { undo: () => void; redo: () => void };

/**
 * Ctrl+Z takes back, Ctrl+Shift+Z and Ctrl+Y bring again (on a Mac with the command key), in fields
 * too. A field that is no part of what is edited has an ancestor with `data-own-undo`.
 */
export function undoKeys({ undo, redo }: Ways) {
	return (event: KeyboardEvent): void => {
		if (!(event.ctrlKey || event.metaKey) || event.altKey || event.defaultPrevented) return;
		if (event.target instanceof Element && event.target.closest('[data-own-undo]')) return;
		const key = event.key.toLowerCase();
		const isRedo = (key === 'z' && event.shiftKey) || (key === 'y' && !event.shiftKey);
		if (!isRedo && key !== 'z') return;
		event.preventDefault();
		if (isRedo) redo();
		else undo();
	};
}
