/** The databases that the running test file has made and not dropped yet. */
export interface TestDatabase {
  /** address for the application's role: owner of the database, no superuser */
  url: string;
  /** Fails when somebody is still connected: a pool or a queue was not ended. */
  drop(): Promise<void>;
}

export const openDatabases = new Map<string, TestDatabase>();
