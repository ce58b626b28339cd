import { cleanup, fireEvent, render, screen, within } from '@testing-library/svelte';
import { afterEach, describe, expect, it } from 'vitest';
import DataTable from './DataTable.svelte';
import Notice from './Notice.svelte';
import NoteName from './NoteName.svelte';
import OfflineState from './OfflineState.svelte';

afterEach(cleanup);

describe('Notice', () => {
	it('reads a refusal out at once and flies a pennant', () => {
		const { container } = render(Notice, { kind: 'refused', title: 'No microphone.' });
		expect(screen.getByRole('alert').textContent).toContain('No microphone.');
		expect(container.querySelector('svg')).not.toBeNull();
	});

	it('flies none over an empty page', () => {
		const { container } = render(Notice, { kind: 'empty', title: 'No attempts yet.' });
		expect(screen.queryByRole('alert')).toBeNull();
		expect(container.querySelector('svg')).toBeNull();
	});
});

describe('OfflineState', () => {
	it('counts what is kept and names it', () => {
		render(OfflineState, {
			kept: [
				{ what: 'Unison', when: '10:42' },
				{ what: 'Interval', when: '10:47' }
			]
		});
		expect(screen.getByRole('heading').textContent).toBe('No network. 2 attempts are kept here.');
		expect(screen.getAllByRole('listitem')).toHaveLength(2);
	});
});

describe('DataTable', () => {
	const columns = [
		{ key: 'name', head: 'Student' },
		{ key: 'unison', head: 'Unison', note: 'cents', pick: true },
		{ key: 'interval', head: 'Interval', note: 'cents', pick: true }
	];
	const rows = [{ name: 'Odo', unison: 0.5, interval: null }];

	it('names its rows and columns', () => {
		render(DataTable, { caption: 'Students', columns, rows });
		const table = screen.getByRole('table', { name: 'Students' });
		expect(within(table).getAllByRole('columnheader')).toHaveLength(3);
		expect(within(table).getByRole('rowheader', { name: 'Odo' })).toBeTruthy();
		expect(
			within(table)
				.getAllByRole('cell')
				.map((cell) => cell.textContent)
		).toEqual(['0.5', '']);
	});

	it('says when there is nothing', () => {
		render(DataTable, { caption: 'Students', columns, rows: [], empty: 'Nobody yet.' });
		expect(screen.getByRole('cell').textContent).toBe('Nobody yet.');
	});

	it('lets the reader of a phone pick the column', async () => {
		const { container } = render(DataTable, { caption: 'Students', columns, rows });
		const shown = () =>
			[...container.querySelectorAll('tbody td:not(.away)')].map((cell) =>
				cell.getAttribute('data-head')
			);
		expect(shown()).toEqual(['Unison']);
		await fireEvent.change(screen.getByLabelText('Show for each'), {
			target: { value: 'interval' }
		});
		expect(shown()).toEqual(['Interval']);
	});
});

describe('NoteName', () => {
	it.each([
		['C#4', ['sharp']],
		['Bb3', ['flat']],
		['A3–C#4', ['sharp']],
		['A4', []],
		['F#3–Bb3', ['sharp', 'flat']]
	])('draws the signs of %s', (name, signs) => {
		render(NoteName, { name });
		const drawn = screen.queryAllByRole('img').map((img) => img.getAttribute('aria-label')?.trim());
		expect(drawn).toEqual(signs);
	});
});
