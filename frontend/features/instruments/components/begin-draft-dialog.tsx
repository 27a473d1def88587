import { useQuery } from '@tanstack/react-query';
import { useId, useState } from 'react';
import type { DraftDto, InstrumentDto } from '#schemas/api/instruments.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { RadioField, SelectField, TextField } from '#frontend/components/fields.tsx';
import { useRefusals } from '#frontend/lib/use-refusals.ts';
import { libraryQuery, useDraftActs } from '../api/instruments.ts';

interface BeginDraftDialogProps {
  studyCode: string;
  present: readonly InstrumentDto[];
  onBegun: (draft: DraftDto) => void;
  onClose: () => void;
}

/** Lays a new instrument on the drafting table: one of the library, or a blank one. */
export function BeginDraftDialog({ studyCode, present, onBegun, onClose }: BeginDraftDialogProps) {
  const { begin } = useDraftActs(studyCode);
  const library = useQuery(libraryQuery(studyCode)).data ?? [];
  const name = useId();
  const [from, setFrom] = useState<'library' | 'blank'>('library');
  const [libraryKey, setLibraryKey] = useState('');
  const [title, setTitle] = useState('');
  const [ownKey, setOwnKey] = useState<string>();
  const [refused, run] = useRefusals();
  const taken = new Set(present.map(({ key }) => key));
  const offered = library.filter(({ key }) => !taken.has(key));
  const chosen = offered.find(({ key }) => key === libraryKey);
  const key = ownKey ?? keyFrom(title);

  const handleAct = async () => {
    if (from === 'library' && chosen === undefined) throw new Error('Choose an instrument of the library.');
    const draft = await run(() =>
      begin(from === 'library' ? { from, key: libraryKey } : { from, key, title: title.trim() }),
    );
    onBegun(draft);
  };

  return (
    <ActDialog
      title="A new instrument"
      act="Lay it on the drafting table"
      reasons={false}
      consequences={<p>A draft is yours to change; coordinators see nothing of it before it is published.</p>}
      onAct={handleAct}
      onClose={onClose}
    >
      <RadioField
        name={name}
        label="Begin"
        choices={[
          {
            value: 'library',
            label: 'from the library',
            help: 'With checks, derived values and samples that prove it.',
          },
          { value: 'blank', label: 'blank', help: 'One field, to be changed.' },
        ]}
        value={from}
        onChange={(value) => setFrom(value as 'library' | 'blank')}
      />
      {from === 'library' ? (
        <SelectField
          label="Instrument of the library"
          required
          placeholder="Choose one"
          choices={offered.map((instrument) => ({ value: instrument.key, label: instrument.title }))}
          value={libraryKey}
          onChange={(event) => setLibraryKey(event.target.value)}
          help={chosen && `${chosen.description ?? ''} ${chosen.fields} fields.`.trim()}
          error={refused['/key']}
        />
      ) : (
        <>
          <TextField
            label="Title"
            required
            maxLength={80}
            value={title}
            onChange={(event) => setTitle(event.target.value)}
            error={refused['/title']}
          />
          <TextField
            label="Key"
            help="Small letters, digits and hyphens. It stays the same from version to version."
            required
            spellCheck={false}
            autoComplete="off"
            value={key}
            onChange={(event) => setOwnKey(event.target.value)}
            error={refused['/key']}
          />
        </>
      )}
    </ActDialog>
  );
}

/** `Grip test 2` → `grip-test-2` */
const keyFrom = (title: string): string =>
  title
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, '-')
    .replaceAll(/^[^a-z]+|-+$/g, '')
    .slice(0, 60);
