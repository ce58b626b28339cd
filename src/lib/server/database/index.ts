// The migration runner is not exported here: only the command line needs it, never the built server.
export { bareConnection, closeDatabase, database } from './connection';
