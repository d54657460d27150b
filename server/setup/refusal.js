/** Refusals of the set-up; PennyweightError needs packages that may not be installed yet. */
export class SetupRefusal extends Error {
  name = 'SetupRefusal';
}

/** Text for a person: a refusal is its one sentence, anything else is a fault of ours and keeps its stack. */
export function explain(error) {
  if (error instanceof SetupRefusal) return error.message;
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}
