import { noteName } from '../../acoustics/units';
import {
	KeptRecords,
	recordDevice,
	sendRecord,
	type SendOutcome,
	type StringCheckRecord
} from './record';
import type { Finding } from './string-check.svelte';

/**
 * What became of the numbers on the page. `kept`: not stored yet, kept in this browser; `lost-soon`:
 * not stored and the browser has no room, so they are on this page alone.
 */
export type KeepState = 'nothing' | 'storing' | 'stored' | 'kept' | 'lost-soon' | 'refused';

function newId(): string {
	if (crypto.randomUUID) return crypto.randomUUID();
	// Without https there is no randomUUID: version 4 by hand (RFC 9562 §5.4).
	const bytes = crypto.getRandomValues(new Uint8Array(16));
	bytes[6] = (bytes[6] & 0x0f) | 0x40;
	bytes[8] = (bytes[8] & 0x3f) | 0x80;
	const hex = Array.from(bytes, (b) => b.toString(16).padStart(2, '0')).join('');
	return hex.replace(/^(.{8})(.{4})(.{4})(.{4})/, '$1-$2-$3-$4-');
}

/** The record of a finding: names and numbers, with an id made here. */
export function recordOf(
	finding: Finding,
	userAgentClass: string,
	checkedAt: string,
	id = newId()
): StringCheckRecord {
	const { asked, source, analysis, microphone } = finding;
	const midis = asked.highMidi === null ? [asked.lowMidi] : [asked.lowMidi, asked.highMidi];
	return {
		id,
		kind: asked.kind,
		notes: midis.map(noteName),
		source,
		result: $state.snapshot(analysis.result),
		device: recordDevice(microphone, analysis.sampleRateHz, userAgentClass),
		checkedAt
	};
}

/** Stores findings on the server, keeps them in the browser until that has worked. */
export class RecordKeeper {
	state = $state<KeepState>('nothing');
	/** earlier checks that still wait in this browser */
	waiting = $state(0);

	private last: StringCheckRecord | null = null;

	constructor(
		private readonly kept: KeptRecords,
		private readonly send: (record: StringCheckRecord) => Promise<SendOutcome> = sendRecord
	) {
		this.waiting = kept.all().length;
	}

	/** Forgets what the page showed before. */
	clear(): void {
		this.last = null;
		this.state = 'nothing';
	}

	async store(record: StringCheckRecord): Promise<void> {
		this.last = record;
		await this.sendLast();
	}

	/** Tries again what was not stored yet: the one on the page and all that wait. */
	async tryAgain(): Promise<void> {
		if (this.last && (this.state === 'kept' || this.state === 'lost-soon')) await this.sendLast();
		this.waiting = await this.kept.sendAll(this.send);
	}

	private async sendLast(): Promise<void> {
		const record = this.last;
		if (!record) return;
		this.state = 'storing';
		const isKept = this.kept.keep(record);
		const outcome = await this.send(record);
		if (outcome !== 'later') this.kept.forget(record.id);
		this.waiting = this.kept.all().length;
		if (this.last !== record) return;
		if (outcome === 'stored') this.state = 'stored';
		else if (outcome === 'refused') this.state = 'refused';
		else this.state = isKept ? 'kept' : 'lost-soon';
	}
}
