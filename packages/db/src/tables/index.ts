/** Every table, for the migrations' generator and for Drizzle's schema. */
export * from './columns.ts';
export * from './company.ts';
export * from './crews.ts';
export * from './history.ts';
export * from './notices.ts';
export * from './pours.ts';
export * from './sites.ts';
export * from './supply.ts';
export * from './system.ts';
export * from './visits.ts';
