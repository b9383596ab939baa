import type { Theme } from './map-colours';

/** Tells whether the page is light or dark now, and again whenever that changes. */
export function watchTheme(tell: (theme: Theme) => void): () => void {
	const device = matchMedia('(prefers-color-scheme: dark)');
	const read = () => {
		const chosen = document.documentElement.dataset.theme;
		if (chosen === 'dark' || chosen === 'light') tell(chosen);
		else tell(device.matches ? 'dark' : 'light');
	};
	const observer = new MutationObserver(read);
	observer.observe(document.documentElement, { attributeFilter: ['data-theme'] });
	device.addEventListener('change', read);
	read();
	return () => {
		observer.disconnect();
		device.removeEventListener('change', read);
	};
}
