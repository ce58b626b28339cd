import { openDB, type DBSchema, type IDBPDatabase } from 'idb';
import type { AttemptSubmission, BlockSpec, RawTrial, ScoredDrillId } from '../drills/types';

/** An attempt that the server has not confirmed yet, or that it refused. */
export interface OutboxEntry {
	readonly userId: string;
	/** The attempt's own id, made by this browser. */
	readonly id: string;
	readonly submission: AttemptSubmission;
	readonly queuedAtMs: number;
	readonly state: 'waiting' | 'refused';
	/** The server's sentence when it refused. */
	readonly refusal: string | null;
	readonly tries: number;
	/** Not sent again before this moment, unless asked to. */
	readonly notBeforeMs: number;
}

/** A block that was begun and not finished: a reload goes on from here. */
export interface BlockInProgress {
	readonly userId: string;
	readonly drill: ScoredDrillId;
	readonly attemptId: string;
	readonly block: BlockSpec;
	readonly trials: readonly RawTrial[];
	/** ISO 8601. */
	readonly startedAt: string;
	/** Made with the last trial and never again, so that handing it in twice is handing in the same. */
	readonly submission: AttemptSubmission | null;
}

interface Schema extends DBSchema {
	outbox: { key: [string, string]; value: OutboxEntry; indexes: { user: string } };
	blocks: { key: [string, string]; value: BlockInProgress };
}

export type OfflineDatabase = IDBPDatabase<Schema>;

export const DATABASE_NAME = 'ebbtone';

/** Opens the browser's own store of what is not sent yet. */
export function openOfflineDatabase(name = DATABASE_NAME): Promise<OfflineDatabase> {
	return openDB<Schema>(name, 1, {
		upgrade(database) {
			const outbox = database.createObjectStore('outbox', { keyPath: ['userId', 'id'] });
			outbox.createIndex('user', 'userId');
			database.createObjectStore('blocks', { keyPath: ['userId', 'drill'] });
		}
	});
}
