/** The ability of the signed-in person, from the rules that the server sent with /api/me. */
import { createContext, useContext } from 'react';
import { abilityFromRules, type AppAbility } from '#contract/access.ts';
import type { Me } from '#contract/account.ts';

export interface Session {
  me: Me;
  ability: AppAbility;
}

export const SessionContext = createContext<Session | null>(null);

export function sessionFrom(me: Me): Session {
  return { me, ability: abilityFromRules(me.rules) };
}

const nobody = abilityFromRules([]);

export function useAbility(): AppAbility {
  return useContext(SessionContext)?.ability ?? nobody;
}

/** null when nobody is signed in */
export function useMe(): Me | null {
  return useContext(SessionContext)?.me ?? null;
}
