import { cleanup, render, screen, within } from '@testing-library/svelte';
import { afterEach, describe, expect, it } from 'vitest';
import { isIn, type Role } from './rooms';
import TopBar from './TopBar.svelte';

afterEach(cleanup);

function rooms(role: Role, path: string): string[] {
	render(TopBar, { actor: { name: 'Tamsin Quillby', role }, path });
	const [across] = screen.getAllByRole('navigation', { name: 'Rooms' });
	return within(across)
		.getAllByRole('link')
		.map((link) => link.textContent?.trim() ?? '');
}

describe('TopBar', () => {
	it.each<[Role, string[]]>([
		['student', ['Today', 'Practice', 'String check', 'Progress']],
		['instructor', ['Classes', 'Today', 'Practice', 'String check', 'Progress']],
		['admin', ['Users', 'Mail', 'Audit']]
	])('shows the rooms of the %s', (role, names) => {
		expect(rooms(role, '/')).toEqual(names);
	});

	it('marks the room one is in, also below it', () => {
		rooms('student', '/practice/unison');
		const marked = screen
			.getAllByRole('link')
			.filter((link) => link.getAttribute('aria-current') === 'page');
		expect(new Set(marked.map((link) => link.textContent))).toEqual(new Set(['Practice']));
		expect(isIn({ href: '/practice', name: '' }, '/practices')).toBe(false);
	});

	it('signs out by a form, never by a link', () => {
		const { container } = render(TopBar, {
			actor: { name: 'Tamsin Quillby', role: 'student' },
			path: '/today'
		});
		const forms = container.querySelectorAll<HTMLFormElement>('form[action="/sign-out"]');
		expect(forms.length).toBeGreaterThan(0);
		for (const form of forms) expect(form.method).toBe('post');
		expect(container.querySelector('a[href="/sign-out"]')).toBeNull();
	});

	it('offers a stranger only to sign in', () => {
		render(TopBar, { actor: null, path: '/' });
		expect(screen.queryByRole('navigation')).toBeNull();
		expect(screen.getByRole('link', { name: 'Sign in' })).toBeTruthy();
	});
});
