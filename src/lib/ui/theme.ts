/** Light, dark, or as the device says. Kept in this browser only; app.html reads it before the first paint. */
export type ThemeChoice = 'device' | 'light' | 'dark';

export function themeChoice(): ThemeChoice {
	const theme = document.documentElement.dataset.theme;
	return theme === 'light' || theme === 'dark' ? theme : 'device';
}

export function chooseTheme(choice: ThemeChoice): void {
	if (choice === 'device') delete document.documentElement.dataset.theme;
	else document.documentElement.dataset.theme = choice;
	try {
		if (choice === 'device') localStorage.removeItem('theme');
		else localStorage.setItem('theme', choice);
	} catch {
		// A browser that keeps nothing still shows the choice until the next page.
	}
}
