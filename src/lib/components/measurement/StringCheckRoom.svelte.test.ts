import { fireEvent, render, screen, within } from '@testing-library/svelte';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { AnalysisClient } from '../../measurement/client';
import { AudioRefusedError } from '../../measurement/formats/audio-refused';
import { MicrophoneError } from '../../measurement/microphone-error';
import StringCheckRoom from './StringCheckRoom.svelte';
import { beating, finding, note, pair } from './test-findings';

const RESULT = finding(
	{},
	{
		notes: [note('C#4', 277.2), note('F#4', 370)],
		pairs: [beating(4, 3, 1109, 1.1, 0.05), pair(8, 6, 2219)],
		advice: ['C#4 has too few partials of its own here.']
	}
).analysis;

function room(
	more: { analysis?: () => Promise<typeof RESULT>; microphone?: MicrophoneError } = {}
) {
	const client: AnalysisClient = {
		analyseClip: async () => RESULT,
		analyseFile: more.analysis ?? (async () => RESULT),
		close: () => undefined
	};
	const hear = vi.fn();
	render(StringCheckRoom, {
		userId: 'me',
		hear,
		store: { getItem: () => null, setItem: () => undefined, removeItem: () => undefined },
		tools: {
			client: async () => client,
			openMicrophone: () => Promise.reject(more.microphone ?? new MicrophoneError('failed'))
		}
	});
	return { hear };
}

const give = (...files: File[]) =>
	fireEvent.change(screen.getByLabelText('Recording to measure'), { target: { files } });
const clip = () => new File([new Uint8Array(4)], 'clip.wav');

describe('the string check', () => {
	const posted: unknown[] = [];
	beforeEach(() => {
		posted.length = 0;
		vi.stubGlobal('fetch', async (_url: string, init: RequestInit) => {
			posted.push(JSON.parse(String(init.body)));
			return new Response('{}', { status: 201 });
		});
		vi.stubGlobal('matchMedia', () => ({ matches: false }));
	});
	afterEach(() => vi.unstubAllGlobals());

	it('offers one filled button, labelled choices, a caution and the privacy sentence', async () => {
		room();
		expect(screen.getAllByRole('heading', { level: 1 })).toHaveLength(1);
		expect(document.querySelectorAll('[data-main]')).toHaveLength(1);
		expect(screen.getByRole('radio', { name: 'Interval' })).toHaveProperty('checked', true);
		expect(screen.getByText(/Eye protection on/)).toBeTruthy();
		expect(screen.getByText(/analysed in this browser and goes nowhere/)).toBeTruthy();
		expect(screen.getByText(/up to/).textContent).toMatch(/A3\s+up to\s+D4\s*, a fourth/);
		await fireEvent.change(screen.getByLabelText('Which interval'), { target: { value: '28' } });
		expect(screen.getByText(/up to/).textContent).toMatch(/A3\s+up to\s+C\s*#?\s*6/);
		await fireEvent.click(screen.getByRole('radio', { name: 'Unison' }));
		expect(screen.queryByLabelText('Which interval')).toBeNull();
	});

	it('keeps the upper note of an interval on the keyboard', async () => {
		room();
		await fireEvent.click(screen.getByRole('radio', { name: 'One string' }));
		await fireEvent.change(screen.getByLabelText('Note'), { target: { value: '108' } });
		await fireEvent.click(screen.getByRole('radio', { name: 'Interval' }));
		expect(screen.getByLabelText('Lower note')).toHaveProperty('value', '103');
	});

	it('shows a file’s result, judges one place and stores the numbers once', async () => {
		const { hear } = room();
		await give(clip());
		const heading = await screen.findByRole('heading', { level: 1, name: /beats per second/ });
		await vi.waitFor(() => expect(document.activeElement).toBe(heading));
		expect(screen.getByRole('heading', { name: /^Judged at C\s*sharp\s*6/ })).toBeTruthy();
		const rows = screen.getAllByRole('listitem').filter((li) => within(li).queryByRole('heading'));
		expect(rows).toHaveLength(2);
		expect(
			within(rows[0]).getByText(/inside|outside|too close/, { selector: '.verdict' })
		).toBeTruthy();
		expect(within(rows[1]).queryByText(/inside|outside/, { selector: '.verdict' })).toBeNull();
		expect(within(rows[1]).getByText('Not measurable')).toBeTruthy();
		expect(within(rows[1]).getByText(/too weak here.*Move the microphone nearer/s)).toBeTruthy();
		await fireEvent.click(within(rows[0]).getByRole('button', { name: /alone/ }));
		expect(hear).toHaveBeenCalledWith(1109);
		await screen.findByText(/These numbers are in your record/);
		expect(posted).toHaveLength(1);
		expect(posted[0]).toMatchObject({ kind: 'interval', notes: ['A3', 'D4'], source: 'file' });
	});

	it('says beside the drop zone why a file is refused, and takes one at a time', async () => {
		const reason = 'This is an MP4 or M4A file. Ebbtone reads WAV, FLAC, Ogg and MP3.';
		room({ analysis: () => Promise.reject(new AudioRefusedError('unsupported', reason)) });
		await give(clip());
		const zone = () => screen.getByRole('group', { name: 'Measure a recording' });
		expect((await screen.findByRole('alert')).textContent).toBe(reason);
		expect(within(zone()).getByRole('alert')).toBeTruthy();
		await give(clip(), clip());
		expect(within(zone()).getByRole('alert').textContent).toMatch(/^One file at a time/);
		expect(posted).toHaveLength(0);
	});

	it('takes a dropped file', async () => {
		room();
		const zone = screen.getByRole('group', { name: 'Measure a recording' });
		await fireEvent.drop(zone, { dataTransfer: { files: [clip()] } });
		await screen.findByRole('heading', { level: 1, name: /beats per second/ });
	});

	it('says why the microphone is refused, what to do, and asks again', async () => {
		room({ microphone: new MicrophoneError('denied') });
		await fireEvent.click(screen.getByRole('button', { name: 'Listen' }));
		const alert = await screen.findByRole('alert');
		expect(alert.textContent).toContain('The browser refuses the microphone.');
		expect(screen.getByText('Set Microphone to Allow, for this site.')).toBeTruthy();
		expect(document.querySelectorAll('[data-main]')).toHaveLength(1);
		await fireEvent.click(screen.getByRole('button', { name: 'Choose something else' }));
		expect(screen.getByRole('button', { name: 'Listen' })).toBeTruthy();
	});

	it('keeps the result on the page when the numbers cannot be stored', async () => {
		vi.stubGlobal('fetch', () => Promise.reject(new TypeError('no network')));
		room();
		await give(clip());
		await screen.findByRole('heading', { name: /Not stored yet/ });
		expect(screen.getByRole('button', { name: 'Try again' })).toBeTruthy();
		expect(screen.getByRole('heading', { level: 1, name: /beats per second/ })).toBeTruthy();
	});
});
