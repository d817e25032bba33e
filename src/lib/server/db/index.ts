export { lockNames, reading, requestKey, SYSTEM, writing, writingAccounts, type Actor } from './as-person';
export { recordAudit } from './audit';
export { isViolation, problemOf } from './errors';
export { rememberAnswer, rememberedAnswer, type KeyClaim } from './idempotency';
export { migrate } from './migrate';
export { nextNumber } from './numbers';
export { openPools, type Db, type Pools, type Trx } from './pools';
export { jsonb, rangeOf, type InstantRange } from './ranges';
