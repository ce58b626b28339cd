import { cleanup, fireEvent, render, screen } from '@testing-library/svelte';
import { createRawSnippet } from 'svelte';
import { afterEach, describe, expect, it, vi } from 'vitest';
import Button from './Button.svelte';
import Field from './Field.svelte';
import JoinedChoice from './JoinedChoice.svelte';
import ToggleGroup from './ToggleGroup.svelte';

afterEach(cleanup);
const words = (text: string) => createRawSnippet(() => ({ render: () => `<span>${text}</span>` }));

describe('Field', () => {
	it('ties label, hint and fault to the field', () => {
		render(Field, {
			label: 'E-mail',
			name: 'email',
			type: 'email',
			value: 'tamsin',
			hint: 'We write to it.',
			error: ['This is no e-mail address.', 'It has no @.']
		});
		const field = screen.getByLabelText<HTMLInputElement>('E-mail');
		expect(field.value).toBe('tamsin');
		expect(field.getAttribute('aria-invalid')).toBe('true');
		const ids = field.getAttribute('aria-describedby')?.split(' ') ?? [];
		const said = ids.map((id) => document.getElementById(id)?.textContent);
		expect(said).toEqual(['We write to it.', 'This is no e-mail address. It has no @.']);
		expect(screen.getByRole('alert').textContent).toContain('It has no @.');
	});

	it('says nothing of faults when there are none', () => {
		render(Field, { label: 'Name', name: 'name', error: [] });
		const field = screen.getByLabelText('Name');
		expect(field.hasAttribute('aria-invalid')).toBe(false);
		expect(field.hasAttribute('aria-describedby')).toBe(false);
		expect(screen.queryByRole('alert')).toBeNull();
	});

	it('keeps what was typed when a fault appears', async () => {
		const { rerender } = render(Field, { label: 'Name', name: 'name' });
		const field = screen.getByLabelText<HTMLInputElement>('Name');
		await fireEvent.input(field, { target: { value: 'Odo' } });
		await rerender({ error: 'Too short.' });
		expect(screen.getByLabelText<HTMLInputElement>('Name').value).toBe('Odo');
	});

	it('offers a select and a textarea under the same label', () => {
		render(Field, {
			label: 'Piano',
			name: 'piano',
			type: 'select',
			options: [
				{ value: 'a', label: 'Upright' },
				{ value: 'b', label: 'Grand' }
			],
			value: 'b'
		});
		render(Field, { label: 'Remark', name: 'remark', type: 'textarea', value: 'Well' });
		expect(screen.getByLabelText<HTMLSelectElement>('Piano').value).toBe('b');
		expect(screen.getByLabelText<HTMLTextAreaElement>('Remark').value).toBe('Well');
	});
});

describe('JoinedChoice', () => {
	const options = ['low', 'both', 'high'].map((value) => ({ value, label: value }));

	it('is one group of radio buttons, so that arrow keys move within it', () => {
		render(JoinedChoice, { legend: 'Note', name: 'note', options, value: 'both' });
		const group = screen.getByRole('group', { name: 'Note' });
		const radios = screen.getAllByRole<HTMLInputElement>('radio');
		expect(group.contains(radios[0])).toBe(true);
		expect(new Set(radios.map((radio) => radio.name))).toEqual(new Set(['note']));
		expect(radios.map((radio) => radio.checked)).toEqual([false, true, false]);
		// Reached by keyboard: not hidden, not taken out of the order.
		for (const radio of radios) {
			radio.focus();
			expect(document.activeElement).toBe(radio);
		}
	});

	it('tells the choice', async () => {
		const onchange = vi.fn();
		render(JoinedChoice, { legend: 'Note', name: 'note', options, value: 'both', onchange });
		await fireEvent.click(screen.getByLabelText('high'));
		expect(onchange).toHaveBeenCalledExactlyOnceWith('high');
		expect(screen.getByLabelText<HTMLInputElement>('both').checked).toBe(false);
	});
});

describe('ToggleGroup', () => {
	const options = ['left', 'middle', 'right'].map((value) => ({ value, label: value }));

	it('cannot put off the last one on', async () => {
		const onchange = vi.fn();
		render(ToggleGroup, {
			legend: 'Strings',
			name: 's',
			options,
			value: ['middle'],
			atLeastOne: true,
			onchange
		});
		const middle = screen.getByLabelText<HTMLInputElement>('middle');
		await fireEvent.click(middle);
		expect(middle.checked).toBe(true);
		expect(onchange).not.toHaveBeenCalled();
		await fireEvent.click(screen.getByLabelText('left'));
		expect(onchange).toHaveBeenLastCalledWith(['left', 'middle']);
		await fireEvent.click(middle);
		expect(onchange).toHaveBeenLastCalledWith(['left']);
	});
});

describe('Button', () => {
	it('stays reachable and says why when it is disabled for a reason', async () => {
		const onclick = vi.fn();
		render(Button, {
			children: words('Commit'),
			disabled: true,
			reason: 'Strike the string first.',
			onclick
		});
		const button = screen.getByRole<HTMLButtonElement>('button', { name: 'Commit' });
		expect(button.disabled).toBe(false);
		expect(button.getAttribute('aria-disabled')).toBe('true');
		const id = button.getAttribute('aria-describedby') ?? '';
		expect(document.getElementById(id)?.textContent).toBe('Strike the string first.');
		await fireEvent.click(button);
		expect(onclick).not.toHaveBeenCalled();
	});

	it('does not send a form while disabled', async () => {
		const form = document.createElement('form');
		const sent = vi.fn((event: Event) => event.preventDefault());
		form.addEventListener('submit', sent);
		document.body.append(form);
		const props = { children: words('Send'), type: 'submit' as const, disabled: true, reason: 'x' };
		const { rerender } = render(Button, { target: form, props });
		await fireEvent.click(screen.getByRole('button'));
		expect(sent).not.toHaveBeenCalled();
		await rerender({ disabled: false });
		await fireEvent.click(screen.getByRole('button'));
		expect(sent).toHaveBeenCalledOnce();
		form.remove();
	});

	it('is a link when it leads somewhere', () => {
		render(Button, { children: words('Go'), href: '/practice' });
		expect(screen.getByRole('link', { name: 'Go' }).getAttribute('href')).toBe('/practice');
	});
});
