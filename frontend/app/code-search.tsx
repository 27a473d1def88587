import { useRef, type SubmitEvent } from 'react';
import { useNavigate } from 'react-router-dom';
import { Key } from '../components/button.tsx';
import { useShortcut } from '../lib/keyboard/use-shortcut.ts';

/** Goes to a participant by code. Codes only: names are nowhere in search. */
export function CodeSearch({ studyCode }: { studyCode: string }) {
  const input = useRef<HTMLInputElement>(null);
  const navigate = useNavigate();
  useShortcut({ id: 'search', keys: '/', label: 'Search by participant code', group: 'Anywhere' }, () =>
    input.current?.focus(),
  );

  const handleSubmit = (event: SubmitEvent<HTMLFormElement>) => {
    event.preventDefault();
    const code = input.current?.value.trim().toUpperCase() ?? '';
    if (code === '') return;
    event.currentTarget.reset();
    input.current?.blur();
    void navigate(`/studies/${studyCode}/participants/${encodeURIComponent(code)}`);
  };

  return (
    <form role="search" onSubmit={handleSubmit} className="relative max-sm:order-last max-sm:w-full">
      <input
        ref={input}
        type="search"
        aria-label="Participant code"
        placeholder="Participant code"
        autoComplete="off"
        spellCheck={false}
        className="min-h-8 w-52 rounded border border-band-edge bg-band-field px-3 py-1 pr-9 text-sm text-chalk placeholder:text-chalk-soft max-sm:w-full"
      />
      <span className="pointer-events-none absolute inset-y-0 right-2 flex items-center" aria-hidden>
        <Key tone="band">/</Key>
      </span>
    </form>
  );
}
