import { describe, expect, it } from 'vitest';
import { benchAct, type BenchKey } from './bench-keys';

function press(key: string, more: Partial<BenchKey> = {}): BenchKey {
	return {
		key,
		shiftKey: false,
		altKey: false,
		ctrlKey: false,
		metaKey: false,
		repeat: false,
		...more
	};
}

describe('keys at the bench', () => {
	it('move by half a cent, by a hair with shift, by five cents with page up and down', () => {
		expect(benchAct(press('ArrowRight'), false, true)).toEqual({ kind: 'move', steps: 10 });
		expect(benchAct(press('ArrowLeft', { shiftKey: true }), false, true)).toEqual({
			kind: 'move',
			steps: -1
		});
		expect(benchAct(press('PageUp'), false, true)).toEqual({ kind: 'move', steps: 100 });
		expect(benchAct(press('PageDown', { repeat: true }), true, true)).toEqual({
			kind: 'move',
			steps: -100
		});
	});

	it('leave Space and Enter to a button that has the focus', () => {
		expect(benchAct(press(' '), true, true)).toBeNull();
		expect(benchAct(press('Enter'), true, true)).toBeNull();
		expect(benchAct(press(' '), false, true)).toEqual({ kind: 'strike' });
		expect(benchAct(press('Enter'), false, true)).toEqual({ kind: 'commit' });
	});

	it('never commit or strike again because a key is held', () => {
		expect(benchAct(press('Enter', { repeat: true }), false, true)).toBeNull();
		expect(benchAct(press(' ', { repeat: true }), false, true)).toBeNull();
	});

	it('have letters that can be switched off', () => {
		expect(benchAct(press('h'), true, true)).toEqual({ kind: 'help' });
		expect(benchAct(press('C'), false, true)).toEqual({ kind: 'check' });
		expect(benchAct(press('h'), false, false)).toBeNull();
		expect(benchAct(press('ArrowLeft'), false, false)).toEqual({ kind: 'move', steps: -10 });
	});

	it('never take a browser’s own shortcut', () => {
		expect(benchAct(press('c', { ctrlKey: true }), false, true)).toBeNull();
		expect(benchAct(press('ArrowLeft', { altKey: true }), false, true)).toBeNull();
		expect(benchAct(press('t', { metaKey: true }), false, true)).toBeNull();
	});
});
