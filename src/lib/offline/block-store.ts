import type { ScoredDrillId } from '../drills/types';
import type { BlockInProgress, OfflineDatabase } from './database';

/** Blocks begun and not finished, one a drill and user. */
export interface BlockStore {
	save(progress: BlockInProgress): Promise<void>;
	load(userId: string, drill: ScoredDrillId): Promise<BlockInProgress | null>;
	clear(userId: string, drill: ScoredDrillId): Promise<void>;
}

/** Keeps the trials already made, so that a reload or a closed tab loses none of them. */
export function createBlockStore(database: () => Promise<OfflineDatabase>): BlockStore {
	return {
		async save(progress) {
			await (await database()).put('blocks', progress);
		},
		async load(userId, drill) {
			return (await (await database()).get('blocks', [userId, drill])) ?? null;
		},
		async clear(userId, drill) {
			await (await database()).delete('blocks', [userId, drill]);
		}
	};
}
