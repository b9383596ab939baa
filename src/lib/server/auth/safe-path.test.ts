import { expect, test } from 'vitest';
import { safePath } from './safe-path';

test.each(['/studies/0b7ce2f3/people?view=waits', '/lab/1/rigs#heron', '/home'])(
	'%s is an address of this site',
	(path) => {
		expect(safePath(path)).toBe(path);
	}
);

test.each([
	null,
	'',
	'https://elsewhere.example/',
	'//elsewhere.example/home',
	'/\\elsewhere.example',
	'\\\\elsewhere.example',
	'/\t/elsewhere.example',
	'javascript:alert(1)',
	'home',
	'/..//elsewhere.example',
	'/signin?to=/signin',
	'/signout',
	'/'
])('%j leads to the first page instead', (path) => {
	expect(safePath(path)).toBe('/home');
});
