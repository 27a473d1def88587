import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useState, useSyncExternalStore } from 'react';
import type { EntryDto, Operation } from '#schemas/api/capture.ts';
import { api } from '../../../lib/api.ts';
import { useDeviceStore } from '../../../lib/device/use-device-store.ts';
import type { UnsentChange } from '../../../lib/device/device-store.ts';
import { useOnline } from '../../../lib/use-online.ts';
import { EntrySaver, type SaverState } from '../model/entry-saver.ts';

/** Saves an entry as it is typed; what the server has not acknowledged lies on the device until it has. */
export function useEntrySaver(
  study: string,
  entry: EntryDto,
): {
  saver: EntrySaver;
  state: SaverState;
  handleOperation: (operation: Operation) => void;
} {
  const client = useQueryClient();
  const device = useDeviceStore();
  const online = useOnline();
  const [kept] = useState(() => new Map<string, UnsentChange<Operation>>());
  const [saver] = useState(
    () =>
      new EntrySaver(entry.revision, {
        send: async ({ key, operations, confirmations }, revision) =>
          (
            await api<EntryDto>(`/studies/${study}/entries/${entry.id}`, {
              method: 'PATCH',
              ifMatch: revision,
              idempotencyKey: key,
              body: { operations, ...(confirmations.length > 0 ? { confirmations } : {}) },
            })
          ).data,
        acknowledged: (operations) => {
          const done = operations.flatMap(({ pointer }) => kept.get(pointer) ?? []);
          void device?.acknowledge(done);
        },
        received: (saved) => {
          client.setQueryData(['entry', study, entry.id], saved);
          void client.invalidateQueries({ queryKey: ['visit', study, saved.visitId, 'quantities'] });
        },
        now: () => new Date().toISOString(),
        later: (work, milliseconds) => setTimeout(work, milliseconds),
      }),
  );
  const state = useSyncExternalStore(saver.subscribe, () => saver.state);

  useEffect(() => {
    saver.sawRevision(entry.revision);
  }, [saver, entry.revision]);

  useEffect(() => {
    if (online) saver.flush();
  }, [saver, online]);

  // What an earlier page left unsent on this device is sent first.
  useEffect(() => {
    if (device === undefined) return;
    void device.unsent<Operation>(study, entry.id).then((changes) => {
      for (const change of changes) {
        kept.set(change.address, change);
        saver.change(change.operation);
      }
    });
  }, [device, study, entry.id, kept, saver]);

  const handleOperation = (operation: Operation): void => {
    saver.change(operation);
    const typedAt = new Date().toISOString();
    void device
      ?.keep({ studyCode: study, entryId: entry.id, address: operation.pointer, operation, typedAt })
      .then((stored) => kept.set(operation.pointer, stored));
  };
  return { saver, state, handleOperation };
}
