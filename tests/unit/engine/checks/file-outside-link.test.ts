import { describe, expect, it } from 'vitest';
import { fileOutsideLink } from '../../../../server/engine/checks/file-outside-link.ts';
import { judge, makeSubject } from './survey-factory.ts';

describe('file/outside-link', () => {
  it('names the link and what it points to', () => {
    const [found] = judge(
      fileOutsideLink,
      makeSubject({ contents: { outsideLinks: [{ path: '/u', kind: 'external-link', target: 'other.h5:/u' }] } }),
    );
    expect(found.path).toBe('/u');
    expect(found.message).toMatch(/^\/u is an external link to other\.h5:\/u, which is outside the archive/);
  });

  it('makes one finding a kind, with the first 20 links as evidence', () => {
    const links = Array.from({ length: 30 }, (_, i) => ({
      path: `/step_${i}`,
      kind: 'external-link' as const,
      target: 'other.h5',
    }));
    const found = judge(
      fileOutsideLink,
      makeSubject({
        contents: { outsideLinks: [...links, { path: '/v', kind: 'external-storage', target: '/etc/hostname' }] },
      }),
    );
    expect(found.map((judgement) => judgement.evidence.count)).toEqual([30, 1]);
    expect(found[0].evidence.links).toHaveLength(20);
  });

  it('is silent when all data are inside, and when nothing could be read', () => {
    expect(judge(fileOutsideLink, makeSubject())).toEqual([]);
    expect(judge(fileOutsideLink, makeSubject(null))).toEqual([]);
  });
});
