/** Style sheet of the local mailbox and the sign-on stand-in: Ovalry's paper, sheet and margin. */
export const styleSheet = `
@font-face { font-family: 'Sheet text'; src: url('/text.woff2') format('woff2'); font-weight: 200 800; font-display: swap; }
@font-face { font-family: 'Sheet heading'; src: url('/heading.woff2') format('woff2'); font-weight: 200 800; font-display: swap; }
:root {
	color-scheme: light dark;
	--paper: #f7f5ef; --sheet: #ffffff; --ink: #1b2430; --muted: #5c6673; --rule: #dad5c8;
	--act: #1f5c4d; --caution: #8a5a0b;
}
@media (prefers-color-scheme: dark) {
	:root {
		--paper: #12171c; --sheet: #1a2128; --ink: #e9e6dc; --muted: #9aa5b1; --rule: #2c353e;
		--act: #6fc2a8; --caution: #e0b050;
	}
}
* { box-sizing: border-box; }
body {
	margin: 0; background: var(--paper); color: var(--ink);
	font: 1rem/1.55 'Sheet text', system-ui, sans-serif;
}
header { padding: 1.25rem clamp(1rem, 4vw, 3rem) 1rem; border-bottom: 1px solid var(--rule); }
header p { margin: 0.25rem 0 0; color: var(--muted); max-width: 44rem; }
h1, h2 { font-family: 'Sheet heading', 'Sheet text', system-ui, sans-serif; }
h1 { font-size: 1.5rem; line-height: 1.2; margin: 0; font-weight: 650; letter-spacing: -0.01em; }
h2 { font-size: 1.05rem; margin: 0 0 0.5rem; font-weight: 650; }
.desk {
	display: grid; grid-template-columns: minmax(0, 1fr) 17rem; gap: 2rem;
	padding: 1.5rem clamp(1rem, 4vw, 3rem) 4rem; max-width: 84rem;
}
.sheet { align-self: start; background: var(--sheet); border: 1px solid var(--rule); padding: 1.25rem clamp(1rem, 2.5vw, 2rem); }
.margin { color: var(--muted); font-size: 0.925rem; }
.margin p, .margin dl { margin: 0 0 1rem; }
@media (max-width: 52rem) { .desk { grid-template-columns: minmax(0, 1fr); } }
a { color: var(--act); text-underline-offset: 0.15em; }
:focus-visible { outline: 2px solid var(--act); outline-offset: 2px; }
table { width: 100%; border-collapse: collapse; }
th { text-align: left; font-weight: 500; color: var(--muted); font-size: 0.875rem; }
th, td { padding: 0.5rem 0.75rem 0.5rem 0; border-bottom: 1px solid var(--rule); vertical-align: top; }
tr:last-child td { border-bottom: 0; }
td.when, .number { font-variant-numeric: tabular-nums; white-space: nowrap; }
td { overflow-wrap: anywhere; }
dt { color: var(--muted); font-size: 0.875rem; }
dd { margin: 0 0 0.6rem; overflow-wrap: anywhere; }
section { padding-top: 1.25rem; margin-top: 1.25rem; border-top: 1px solid var(--rule); }
.sheet > section:first-child { padding-top: 0; margin-top: 0; border-top: 0; }
pre { white-space: pre-wrap; overflow-wrap: anywhere; font: inherit; margin: 0; }
iframe { width: 100%; height: 28rem; border: 1px solid var(--rule); background: #ffffff; color-scheme: light; }
.mark { color: var(--caution); font-size: 0.875rem; }
.choices { list-style: none; margin: 0; padding: 0; }
.choices li { border-bottom: 1px solid var(--rule); }
.choices a { display: block; padding: 0.65rem 0; text-decoration: none; }
.choices a:hover strong { text-decoration: underline; }
.choices span { color: var(--muted); }
form { display: flex; flex-wrap: wrap; gap: 0.5rem; align-items: end; margin-bottom: 1rem; }
label { display: block; flex: 1 1 16rem; }
input {
	width: 100%; padding: 0.5rem 0.65rem; font: inherit; color: inherit; background: var(--paper);
	border: 1px solid var(--muted); border-radius: 0;
}
button {
	padding: 0.55rem 1rem; font: inherit; font-weight: 600; color: var(--sheet); background: var(--act);
	border: 1px solid var(--act); border-radius: 10px; cursor: pointer;
}
.fault { color: var(--caution); margin: 0 0 1rem; }
@media (max-width: 40rem) {
	table, tbody, tr, td { display: block; }
	thead { position: absolute; clip-path: inset(50%); height: 1px; overflow: hidden; }
	td { border: 0; padding: 0; }
	tr { padding: 0.6rem 0; border-bottom: 1px solid var(--rule); }
	iframe { height: 26rem; }
}
`;

/** An oval at a slant: the mark in the browser's tab. */
export const icon = `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 32 32"><ellipse cx="16" cy="16" rx="13" ry="7" transform="rotate(-32 16 16)" fill="none" stroke="#1f5c4d" stroke-width="3"/></svg>`;
