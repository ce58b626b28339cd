import { fireEvent, render, screen } from '@testing-library/svelte';
import { beforeEach, describe, expect, it } from 'vitest';
import { generateBlock } from '../../drills/generate';
import type { BenchAct } from './bench-keys';
import TrialBench from './TrialBench.svelte';

const [unison] = generateBlock('unison', 1).trials;
const [interval] = generateBlock('interval', 1).trials;

function bench(spec = unison, struck = true) {
	const acts: BenchAct[] = [];
	const { container } = render(TrialBench, {
		spec,
		kick: 'Unison, trial 1 of 10',
		struck,
		waiting: false,
		onact: (act: BenchAct) => void acts.push(act)
	});
	return { acts, container, room: screen.getByRole('application') };
}

beforeEach(() => localStorage.clear());

describe('the bench', () => {
	it('shows no figure of the string: no cents, no rate, no start', () => {
		for (const spec of [unison, interval]) {
			const { container } = bench(spec);
			// Note names and the trial's number are the only figures that may stand here.
			const text = (container.textContent ?? '')
				.replace(/[A-G]#?\d/g, '')
				.replace('trial 1 of 10', '');
			expect(text).not.toMatch(/\d\.\d/);
			expect(container.innerHTML).not.toContain(String(Math.abs(spec.startCents)));
			container.remove();
		}
	});

	it('looks the same whatever was moved and struck', async () => {
		const { container, room } = bench();
		const before = container.innerHTML;
		for (const key of ['ArrowLeft', 'ArrowRight', 'PageUp', 'PageUp', ' ', 'h', '1', '2']) {
			await fireEvent.keyDown(room, { key });
		}
		expect(container.innerHTML).toBe(before);
	});

	it('strikes with Space and leaves the string with Enter, but not while a button has the focus', async () => {
		const { acts, room } = bench();
		const button = screen.getByRole('button', { name: 'A hair sharper' });
		await fireEvent.keyDown(button, { key: ' ' });
		await fireEvent.keyDown(button, { key: 'Enter' });
		expect(acts).toEqual([]);
		await fireEvent.keyDown(room, { key: ' ' });
		await fireEvent.keyDown(room, { key: 'Enter' });
		expect(acts.map(({ kind }) => kind)).toEqual(['strike', 'commit']);
	});

	it('has a button for everything a key does', async () => {
		const { acts } = bench(interval);
		for (const name of [
			'Strike both',
			'Hear the target beat',
			'Hear the check',
			'Where to listen',
			'Leave it there'
		]) {
			await fireEvent.click(screen.getByRole('button', { name }));
		}
		await fireEvent.click(screen.getByRole('button', { name: 'Much flatter' }));
		await fireEvent.click(screen.getByRole('button', { name: 'A hair sharper' }));
		expect(acts).toEqual([
			{ kind: 'strike' },
			{ kind: 'target' },
			{ kind: 'check' },
			{ kind: 'help' },
			{ kind: 'commit' },
			{ kind: 'move', steps: -100 },
			{ kind: 'move', steps: 1 }
		]);
	});

	it('asks for a blow before it takes an answer', async () => {
		const { acts } = bench(unison, false);
		await fireEvent.click(screen.getByRole('button', { name: 'Leave it there' }));
		expect(acts).toEqual([]);
		expect(screen.getByText('Strike both before you leave it.')).toBeTruthy();
	});

	it('gives no check and no target beat in a unison, by key either', async () => {
		const { acts, room } = bench();
		await fireEvent.keyDown(room, { key: 'c' });
		await fireEvent.keyDown(room, { key: 't' });
		expect(acts).toEqual([]);
		expect(screen.queryByRole('button', { name: 'Hear the check' })).toBeNull();
	});

	it('lets the letter keys be switched off, and remembers', async () => {
		const { acts, room } = bench();
		await fireEvent.click(screen.getByRole('button', { name: 'Letter keys off' }));
		await fireEvent.keyDown(room, { key: 'h' });
		expect(acts).toEqual([]);
		expect(localStorage.getItem('ebbtone.letter-keys')).toBe('off');
		await fireEvent.keyDown(room, { key: 'ArrowLeft' });
		expect(acts).toHaveLength(1);
	});
});
