import type { MicrophoneFacts } from '../../measurement/microphone-facts';
import type { MeasureKind, MeasureResult } from '../../measurement/types';

/** A string check as it is sent: numbers only, never sound. */
export interface StringCheckRecord {
	/** Made here, so that sending twice stores once. */
	id: string;
	kind: MeasureKind;
	/** names with sharps, lower note first */
	notes: string[];
	source: 'microphone' | 'file';
	result: MeasureResult;
	device: {
		sampleRateHz: number;
		echoCancellation: boolean | null;
		noiseSuppression: boolean | null;
		autoGainControl: boolean | null;
		userAgentClass: string;
	};
	/** ISO 8601, UTC */
	checkedAt: string;
}

/** `later`: no network or server trouble, keep it; `refused`: it will never be taken. */
export type SendOutcome = 'stored' | 'later' | 'refused';

/** Facts about the device for the record; a file has no microphone. */
export function recordDevice(
	microphone: MicrophoneFacts | null,
	sampleRateHz: number,
	userAgentClass: string
): StringCheckRecord['device'] {
	return {
		sampleRateHz,
		echoCancellation: microphone?.echoCancellation ?? null,
		noiseSuppression: microphone?.noiseSuppression ?? null,
		autoGainControl: microphone?.autoGainControl ?? null,
		userAgentClass
	};
}

/** Sends one check. Signed-out (401) counts as later: it can be sent after signing in again. */
export async function sendRecord(
	record: StringCheckRecord,
	send: typeof fetch = fetch
): Promise<SendOutcome> {
	try {
		const response = await send('/api/string-checks', {
			method: 'POST',
			headers: { 'content-type': 'application/json' },
			body: JSON.stringify(record)
		});
		if (response.ok) return 'stored';
		const never = [400, 403, 404, 409, 413, 422].includes(response.status);
		return never ? 'refused' : 'later';
	} catch {
		return 'later';
	}
}

/** The part of Storage that is used here. */
export type KeptStore = Pick<Storage, 'getItem' | 'setItem' | 'removeItem'>;

const MOST_KEPT = 50;

/** Checks that could not be sent yet, in this browser, apart for each person. */
export class KeptRecords {
	private readonly key: string;

	constructor(
		userId: string,
		private readonly store: KeptStore
	) {
		this.key = `ebbtone.string-checks.${userId}`;
	}

	all(): StringCheckRecord[] {
		try {
			const kept: unknown = JSON.parse(this.store.getItem(this.key) ?? '[]');
			return Array.isArray(kept) ? (kept as StringCheckRecord[]) : [];
		} catch {
			return [];
		}
	}

	/** @returns false when the browser has no room or forbids it; the page then says so */
	keep(record: StringCheckRecord): boolean {
		const others = this.all().filter((r) => r.id !== record.id);
		return this.write([...others, record].slice(-MOST_KEPT));
	}

	forget(id: string): void {
		this.write(this.all().filter((r) => r.id !== id));
	}

	/** Sends all that is kept, oldest first; stops at the first that must wait. @returns how many are left */
	async sendAll(send: (record: StringCheckRecord) => Promise<SendOutcome>): Promise<number> {
		for (const record of this.all()) {
			if ((await send(record)) === 'later') break;
			this.forget(record.id);
		}
		return this.all().length;
	}

	private write(records: StringCheckRecord[]): boolean {
		try {
			if (records.length === 0) this.store.removeItem(this.key);
			else this.store.setItem(this.key, JSON.stringify(records));
			return true;
		} catch {
			return false;
		}
	}
}
