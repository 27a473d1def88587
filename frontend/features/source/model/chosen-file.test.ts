import { describe, expect, it } from 'vitest';
import { sourceLimit } from '#schemas/vocabulary/source-kinds.ts';
import { judgeFile } from './chosen-file.ts';

describe('judgeFile', () => {
  it('takes a file of a known type, and sends it without its name', () => {
    const judged = judgeFile(new File(['%PDF-1.7'], 'someone.pdf', { type: 'application/pdf' }));
    expect(judged).toHaveProperty('file.type', 'application/pdf');
    expect('file' in judged && judged.file instanceof File).toBe(false);
  });

  it('knows a table by its ending where the system calls it a spreadsheet', () => {
    const judged = judgeFile(new File(['a,b'], 'FLOW.CSV', { type: 'application/vnd.ms-excel' }));
    expect(judged).toHaveProperty('file.type', 'text/csv');
  });

  it('refuses other kinds, empty files and files above the limit, each with what to do', () => {
    expect(judgeFile(new File(['x'], 'a.docx', { type: 'application/msword' }))).toHaveProperty('problem');
    expect(judgeFile(new File([], 'a.png', { type: 'image/png' }))).toHaveProperty('problem');
    const large = new File(['x'], 'a.png', { type: 'image/png' });
    Object.defineProperty(large, 'size', { value: sourceLimit + 1 });
    expect(JSON.stringify(judgeFile(large))).toMatch(/too large/);
  });
});
