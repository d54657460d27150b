import { describe, expect, it } from 'vitest';
import { fileUnreadable } from '../../../../server/engine/checks/file-unreadable.ts';
import { fileUnwrittenData } from '../../../../server/engine/checks/file-unwritten-data.ts';
import { partialSurvey } from '../../../../server/engine/checks/partial-survey.ts';
import { judge, makeSubject, makeSurvey } from './survey-factory.ts';

describe('file/unreadable', () => {
  it('passes on what stopped the reading, with its place', () => {
    const failure = { message: 'run.h5 ends after 512 of 4096 bytes: upload it again.', path: '/u' };
    expect(judge(fileUnreadable, makeSubject(null, { failure }))).toEqual([
      { path: '/u', message: failure.message, evidence: {}, remedy: null },
    ]);
  });

  it('names every damaged place of a container that opens', () => {
    const damaged = [
      { path: '/u', reason: 'its chunk index is broken.' },
      { path: '/v', reason: 'no data type' },
    ];
    const found = judge(fileUnreadable, makeSubject({ contents: { damaged } }));
    expect(found.map((judgement) => judgement.path)).toEqual(['/u', '/v']);
    expect(found[0].message).toBe(
      '/u could not be read: its chunk index is broken; compare the file with the original and upload it again.',
    );
  });

  it('leaves an array that claims more than was written to file/unwritten-data, which then fires', () => {
    const failure = { message: '/u was not read.', path: '/u' };
    const { contents, reading } = makeSurvey({ fields: [{ values: [[1, 2]], allocated: 0 }] });
    reading.roles.push({ path: '/u', role: 'field', why: 'shape' });
    const subject = { ...makeSubject(null, { failure }), survey: partialSurvey(contents, reading) };
    expect(judge(fileUnreadable, subject)).toEqual([]);
    expect(judge(fileUnwrittenData, subject).map((found) => found.path)).toEqual(['/u']);
    expect(judge(fileUnreadable, { ...subject, failure: { ...failure, path: '/v' } })).toHaveLength(1);
  });

  it('is silent on a sound archive, on one of one snapshot, and before anything was read', () => {
    expect(judge(fileUnreadable, makeSubject())).toEqual([]);
    expect(judge(fileUnreadable, makeSubject({ fields: [{ values: [[1]] }] }))).toEqual([]);
    expect(judge(fileUnreadable, makeSubject(null))).toEqual([]);
  });
});
