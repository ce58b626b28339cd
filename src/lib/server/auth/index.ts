export { homeOf, publicRoute, requireActor, requireRole, ROLES } from './actor';
export type { Actor, AuthorisedEvent, Role } from './actor';
