import { describe, expect, it } from 'vitest';
import { faultFromException, MicrophoneError } from './microphone-error';
import { CONSTRAINTS, factsFromSettings, labelClass, processingThatIs } from './microphone-facts';

describe('microphone facts', () => {
	it('asks for all three kinds of processing off and one channel', () => {
		expect(CONSTRAINTS).toEqual({
			echoCancellation: false,
			noiseSuppression: false,
			autoGainControl: false,
			channelCount: 1
		});
	});

	it('is unprocessed when the browser says off', () => {
		const settings = { echoCancellation: false, noiseSuppression: false, autoGainControl: false };
		const facts = factsFromSettings(settings, 'Built-in Audio', 48_000);
		expect(facts.processed).toBe(false);
		expect(facts.label).toBe('built-in');
		expect(processingThatIs(facts, null)).toEqual([]);
	});

	it.each(['echoCancellation', 'noiseSuppression', 'autoGainControl'] as const)(
		'is processed when %s stayed on',
		(key) => {
			const settings = { echoCancellation: false, noiseSuppression: false, autoGainControl: false };
			const facts = factsFromSettings({ ...settings, [key]: true }, '', 44_100);
			expect(facts.processed).toBe(true);
			expect(processingThatIs(facts, true)).toHaveLength(1);
		}
	);

	it('does not take silence for off', () => {
		const facts = factsFromSettings({ echoCancellation: false }, 'Microphone', 48_000);
		expect(facts.processed).toBe(false);
		expect(processingThatIs(facts, null)).toEqual(['noise suppression', 'automatic gain']);
	});

	it('understands echo cancellation answered by name', () => {
		const settings = { echoCancellation: 'remote-only' } as unknown as MediaTrackSettings;
		expect(factsFromSettings(settings, '', 48_000).processed).toBe(true);
	});

	it.each([
		['', 'unnamed'],
		['USB Audio Device', 'usb'],
		['Wireless Headset', 'headset'],
		['Internal Microphone', 'built-in'],
		['Fake Default Audio Input', 'virtual'],
		['Studio', 'other']
	])('classes the label "%s" as %s', (label, kind) => {
		expect(labelClass(label)).toBe(kind);
	});
});

describe('microphone faults', () => {
	it.each([
		['NotAllowedError', 'denied'],
		['SecurityError', 'denied'],
		['NotFoundError', 'no-device'],
		['NotReadableError', 'busy'],
		['TypeError', 'failed']
	])('%s means %s', (name, fault) => {
		expect(faultFromException(new DOMException('x', name))).toBe(fault);
	});

	it('each fault has a sentence, what it means and steps', () => {
		for (const fault of [
			'insecure',
			'unsupported',
			'denied',
			'no-device',
			'busy',
			'frozen',
			'ended',
			'gap',
			'failed'
		] as const) {
			const { title, text, steps } = new MicrophoneError(fault).text;
			for (const sentence of [title, text, ...steps]) expect(sentence).toMatch(/[.]$/);
			expect(steps.length).toBeGreaterThan(0);
		}
	});
});
