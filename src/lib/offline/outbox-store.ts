import type { OfflineDatabase, OutboxEntry } from './database';

/** Where unsent attempts are kept. */
export interface OutboxStore {
	list(userId: string): Promise<OutboxEntry[]>;
	get(userId: string, id: string): Promise<OutboxEntry | null>;
	put(entry: OutboxEntry): Promise<void>;
	remove(userId: string, id: string): Promise<void>;
}

/** Kept in the browser's database: survives closing the tab. */
export function databaseOutboxStore(database: () => Promise<OfflineDatabase>): OutboxStore {
	return {
		async list(userId) {
			return (await database()).getAllFromIndex('outbox', 'user', userId);
		},
		async get(userId, id) {
			return (await (await database()).get('outbox', [userId, id])) ?? null;
		},
		async put(entry) {
			await (await database()).put('outbox', entry);
		},
		async remove(userId, id) {
			await (await database()).delete('outbox', [userId, id]);
		}
	};
}

/** For browsers that keep nothing (private windows, a full disk): lasts as long as the page does. */
export function memoryOutboxStore(): OutboxStore {
	const entries = new Map<string, OutboxEntry>();
	const key = (userId: string, id: string) => `${userId} ${id}`;
	return {
		list: async (userId) => [...entries.values()].filter((entry) => entry.userId === userId),
		get: async (userId, id) => entries.get(key(userId, id)) ?? null,
		put: async (entry) => void entries.set(key(entry.userId, entry.id), entry),
		remove: async (userId, id) => void entries.delete(key(userId, id))
	};
}
