import { participantStates } from '#schemas/vocabulary/states.ts';
import { SelectField, TextField } from '#frontend/components/fields.tsx';
import { useActing } from '#frontend/lib/session/session.ts';
import { useUrlState } from '#frontend/lib/use-url-state.ts';
import type { ParticipantFilters as Filters } from '../api/participants.ts';

/** The filters of the list, kept in the address. */
export function useParticipantFilters(): Filters & { set: Record<keyof Filters, (value: string) => void> } {
  const [site, setSite] = useUrlState('site');
  const [state, setState] = useUrlState('state');
  const [code, setCode] = useUrlState('code');
  return { site, state, code, set: { site: setSite, state: setState, code: setCode } };
}

export function ParticipantFilters({ site, state, code, set }: ReturnType<typeof useParticipantFilters>) {
  const { sites } = useActing();
  return (
    <search className="flex flex-wrap items-end gap-4 px-4 pt-3 pb-4">
      <TextField
        label="Code begins with"
        autoComplete="off"
        spellCheck={false}
        className="w-40"
        value={code}
        onChange={(event) =>
          set.code(
            event.target.value
              .toUpperCase()
              .replaceAll(/[^A-Z0-9-]/g, '')
              .slice(0, 12),
          )
        }
      />
      <SelectField
        label="State"
        className="w-40"
        placeholder="all states"
        choices={participantStates.map((value) => ({ value, label: value }))}
        value={state}
        onChange={(event) => set.state(event.target.value)}
      />
      {sites.length > 1 && (
        <SelectField
          label="Site"
          className="w-52"
          placeholder="all sites"
          choices={sites.map(({ id, code: siteCode, name }) => ({
            value: id,
            label: `${siteCode} · ${name}`,
          }))}
          value={site}
          onChange={(event) => set.site(event.target.value)}
        />
      )}
    </search>
  );
}
