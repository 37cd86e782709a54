export * from './users';
export * from './groups';
export * from './inequalities';
export * from './references';
export * from './recomputations';
export * from './claims';
export * from './outbox';
export * from './audit';
