import type { Page } from '@playwright/test';
import { readFileSync } from 'node:fs';
import { wavBytes } from '../support/fake-microphone';
import { expectNumbersOnly, firstPartialShown, sent, stored } from './listening';
import { centsBetween, firstPartialHz, recording } from './recordings';
import { expect, student, test } from './support';

const CLIP = 'grand-one-c4-v10-l';

async function choose(page: Page, name: string, buffer: Buffer, mimeType = 'audio/wav') {
	const choosing = page.waitForEvent('filechooser');
	await page.getByRole('button', { name: 'Choose a file' }).click();
	await (await choosing).setFiles({ name, mimeType, buffer });
}

async function askForC4(page: Page) {
	await page.getByRole('radio', { name: 'One string' }).check();
	await page.getByLabel('Note', { exact: true }).selectOption('C4');
}

test('a FLAC file by the button: its pitch, and nothing but numbers sent', async ({ visit }) => {
	const page = await visit(student('mirabel'), '/string-check');
	const requests = sent(page);
	await askForC4(page);
	await choose(page, 'c4.flac', readFileSync(recording(CLIP)), 'audio/flac');
	await stored(page);
	const hz = await firstPartialShown(page, 'C4');
	expect(Math.abs(centsBetween(hz, firstPartialHz(CLIP)))).toBeLessThan(2.5);
	await expect(
		page.getByText('From a file: what was done to it before is not known.')
	).toBeVisible();
	expectNumbersOnly(requests);
});

test('the same file dropped on the page', async ({ visit }) => {
	const page = await visit(student('mirabel'), '/string-check');
	await askForC4(page);
	const bytes = readFileSync(recording(CLIP)).toString('base64');
	const transfer = await page.evaluateHandle((text) => {
		const transfer = new DataTransfer();
		const data = Uint8Array.from(atob(text), (sign) => sign.charCodeAt(0));
		transfer.items.add(new File([data], 'c4.flac', { type: 'audio/flac' }));
		return transfer;
	}, bytes);
	const place = page.getByRole('group', { name: 'Measure a recording' });
	await place.dispatchEvent('dragover', { dataTransfer: transfer });
	await place.dispatchEvent('drop', { dataTransfer: transfer });
	await expect(page.getByRole('heading', { level: 1 })).toHaveText(/^C4 sounds at 261\.\d\d Hz/, {
		timeout: 60_000
	});
});

test('what cannot be measured is refused where it was given, and the choice stays', async ({
	visit
}) => {
	const page = await visit(student('mirabel'), '/string-check');
	const requests = sent(page);
	await askForC4(page);
	const fault = page.getByRole('group', { name: 'Measure a recording' }).getByRole('alert');
	const text = Buffer.from('A string holds some 70 to 90 kilograms.');
	await choose(page, 'notes.txt', text, 'text/plain');
	await expect(fault).toHaveText(
		'This is not a sound file that can be read here. Ebbtone reads WAV, FLAC, Ogg and MP3.'
	);
	await choose(page, 'long.wav', wavBytes(new Float32Array(31 * 8000), 8000));
	await expect(fault).toHaveText(/^This sound is longer than 30 seconds/);
	await choose(page, 'large.wav', Buffer.alloc(20_000_001));
	await expect(fault).toHaveText(/^This file is 20\.1 MB and the limit is 20 MB/);
	const cut = readFileSync(recording(CLIP)).subarray(0, 30_000);
	await choose(page, 'cut.flac', cut, 'audio/flac');
	await expect(fault).toHaveText(/damaged/);
	await choose(page, 'silence.wav', wavBytes(new Float32Array(0), 8000));
	await expect(fault).toBeVisible();
	await expect(page.getByLabel('Note', { exact: true })).toHaveValue('60');
	await expect(page.getByRole('radio', { name: 'One string' })).toBeChecked();
	expect(requests).toEqual([]);
});
