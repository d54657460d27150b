/** The people of the demo; invented, like the basin. */
import type { MemberRole } from '#contract/access.ts';

export interface DemoPerson {
  key: 'contributor' | 'steward' | 'modeler' | 'auditor' | 'administrator';
  name: string;
  email: string;
  /** roles in the demo's campaign; the administrator holds theirs in the whole organisation */
  roles: MemberRole[];
}

export const demoPeople: DemoPerson[] = [
  { key: 'contributor', name: 'Ines Okafor', email: 'ines@saltmere.example', roles: ['contributor'] },
  { key: 'steward', name: 'Marit Halvorsen', email: 'marit@saltmere.example', roles: ['steward'] },
  { key: 'modeler', name: 'Teo Brandt', email: 'teo@saltmere.example', roles: ['modeler'] },
  { key: 'auditor', name: 'Priya Raman', email: 'priya@saltmere.example', roles: ['auditor'] },
  { key: 'administrator', name: 'Jonas Keel', email: 'jonas@saltmere.example', roles: ['administrator'] },
];
