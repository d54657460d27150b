/** All tables, for Drizzle. */
export * from './auth.ts';
export * from './campaign.ts';
export * from './archive.ts';
export * from './dataset.ts';
export * from './operation.ts';
