import { describe, expect, it } from 'vitest';
import type { EntryDto, Operation } from '#schemas/api/capture.ts';
import { ApiProblem, OfflineError } from '../../../lib/api.ts';
import { EntrySaver, type SaverPorts } from './entry-saver.ts';

type Sent = { key: string; operations: Operation[]; confirmations: unknown[]; revision: number };

/** A saver over a server that answers as the test says, one answer a request. */
function saverWith(answers: ((sent: Sent) => Partial<EntryDto> | Error)[]) {
  const sent: Sent[] = [];
  const acknowledged: Operation[] = [];
  const timers: (() => void)[] = [];
  const ports: SaverPorts = {
    send: async (batch, revision) => {
      const request = { ...batch, revision };
      sent.push(request);
      const answer = answers.shift()?.(request) ?? new Error('no answer planned');
      if (answer instanceof Error) throw answer;
      return { revision: revision + 1, refused: [], ...answer } as EntryDto;
    },
    acknowledged: (operations) => acknowledged.push(...operations),
    received: () => undefined,
    now: () => '2026-03-14T09:00:00Z',
    later: (work) => timers.push(work),
  };
  const run = async (): Promise<void> => {
    while (timers.length > 0) {
      timers.shift()?.();
      await new Promise((resolve) => setTimeout(resolve, 0));
    }
  };
  return { saver: new EntrySaver(3, ports), sent, acknowledged, run, timers };
}

const one: Operation = { pointer: '/systolic/0', value: 118 };
const other: Operation = { pointer: '/diastolic/0', value: 76 };

describe('EntrySaver', () => {
  it('sends changes that come together in one save and says when they are stored', async () => {
    const { saver, sent, acknowledged, run } = saverWith([() => ({})]);
    saver.change(one);
    saver.change(other);
    expect(saver.state).toMatchObject({ phase: 'waiting', waiting: 2 });
    await run();
    expect(sent).toHaveLength(1);
    expect(acknowledged).toEqual([one, other]);
    expect(saver.state).toMatchObject({ phase: 'saved', waiting: 0, revision: 4 });
  });

  // proves DE-04
  it('sends the same batch again with the same key after a lost answer', async () => {
    const { saver, sent, run, timers } = saverWith([() => new OfflineError(null), () => ({}), () => ({})]);
    saver.change(one);
    timers.shift()?.();
    await new Promise((resolve) => setTimeout(resolve, 0));
    expect(saver.state.phase).toBe('offline');
    saver.change(other);
    await run();
    expect(sent[1]?.key).toBe(sent[0]?.key);
    expect(sent[1]?.operations).toEqual([one]);
    expect(sent[2]?.operations).toEqual([other]);
  });

  // proves DE-02
  it('merges other fields by itself and asks a person about the same one', async () => {
    const stale = new ApiProblem(412, {
      slug: 'stale-revision',
      currentRevision: 9,
      changed: [
        { address: '/systolic/0', by: 'I. Varro', at: '2026-03-14T08:59:00Z', present: { value: 121 } },
      ],
    });
    const { saver, sent, acknowledged, run } = saverWith([() => stale, () => ({}), () => ({})]);
    saver.change(one);
    saver.change(other);
    await run();
    expect(sent[1]).toMatchObject({ revision: 9, operations: [other] });
    expect(saver.state.conflicts).toMatchObject([
      { address: '/systolic/0', theirs: { value: 121 }, by: 'I. Varro' },
    ]);
    expect(acknowledged).toEqual([other]);
    saver.resolve('/systolic/0', 'mine');
    await run();
    expect(sent[2]?.operations).toEqual([one]);
    expect(saver.state.conflicts).toEqual([]);
  });

  it('keeps a refused value in sight and sends it again with a reason', async () => {
    const refusal = {
      pointer: '/systolic/0',
      checkId: 'usual',
      severity: 'soft',
      message: 'unusual',
    } as const;
    const refused = new ApiProblem(422, { slug: 'fields-refused', refused: [refusal] });
    const { saver, sent, run } = saverWith([() => refused, () => ({})]);
    saver.change(one);
    await run();
    expect(saver.state.refused).toEqual([refusal]);
    saver.confirm('usual', 'measured twice', [one]);
    await run();
    expect(sent[1]?.confirmations).toEqual([{ checkId: 'usual', reason: 'measured twice' }]);
    expect(saver.state.refused).toEqual([]);
  });

  it('stops at a lock and keeps what was typed', async () => {
    const { saver, acknowledged, run } = saverWith([
      () => new ApiProblem(409, { slug: 'study-locked', detail: 'The study is locked.' }),
    ]);
    saver.change(one);
    await run();
    expect(saver.state).toMatchObject({ phase: 'stopped', stopped: 'The study is locked.', waiting: 1 });
    expect(acknowledged).toEqual([]);
  });
});
