/** file/outside-link: an external link, virtual source or external raw storage points out of the archive. Never followed. */
import type { Check } from './check.ts';
import { evidenceLength } from './evidence.ts';

const words = {
  'external-link': ['an external link', 'external links'],
  'virtual-source': ['a virtual source', 'virtual sources'],
  'external-storage': ['external raw storage', 'external raw storages'],
} as const;

export const fileOutsideLink: Check = {
  id: 'file/outside-link',
  severity: 'blocker',
  title: 'All data are inside the archive',
  source: 'HDF5 reference manual, H5Lcreate_external, H5Pset_virtual, H5Pset_external',
  thresholds: {},
  judge({ survey }) {
    const links = survey?.contents.outsideLinks ?? [];
    return (Object.keys(words) as (keyof typeof words)[]).flatMap((kind) => {
      const those = links.filter((link) => link.kind === kind);
      if (those.length === 0) return [];
      const [{ path, target }] = those;
      const [one, many] = words[kind];
      const subject =
        those.length === 1
          ? `${path} is ${one} to ${target}`
          : `${those.length} ${many} point out of the archive, first ${path} to ${target}`;
      return [
        {
          path,
          message: `${subject}, which is outside the archive and is never followed: pack the data themselves into the file (for HDF5 with h5repack or by copying the data set) and upload again.`,
          evidence: {
            count: those.length,
            links: those.slice(0, evidenceLength).map((link) => `${link.path} -> ${link.target}`),
          },
          remedy: null,
        },
      ];
    });
  },
};
