import { useOnline } from '../lib/use-online.ts';
import { StateMark } from './pen-mark.tsx';

/** Says that the network is away, and that nothing typed is lost. */
export function OfflineBanner({ waiting = 0 }: { waiting?: number }) {
  const online = useOnline();
  return (
    <div role="status" data-print="hide">
      {!online && (
        <p className="flex flex-wrap items-center gap-x-3 border-b bg-straw-wash px-6 py-1.5 text-sm text-straw-ink">
          <StateMark state="late" word="no network" />
          {waiting > 0
            ? `Kept on this device, ${waiting} ${waiting === 1 ? 'change' : 'changes'} waiting.`
            : 'Changes are kept on this device and sent when it is back.'}
        </p>
      )}
    </div>
  );
}
