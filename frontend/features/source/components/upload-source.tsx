import { useId, useRef, useState } from 'react';
import {
  attestations,
  sourceKinds,
  type Attestation,
  type SourceKind,
} from '#schemas/vocabulary/source-kinds.ts';
import type { Level } from '#schemas/vocabulary/states.ts';
import { Button } from '../../../components/button.tsx';
import { ErrorSummary } from '../../../components/error-summary.tsx';
import { controlLook, FieldError } from '../../../components/field.tsx';
import { SelectField } from '../../../components/fields.tsx';
import { say } from '../../../lib/notices.ts';
import { useActing } from '../../../lib/session/session.ts';
import { useUploadSource } from '../api/source.ts';
import { acceptedFiles, acceptedWords, judgeFile } from '../model/chosen-file.ts';

const choicesOf = (words: Record<string, string>) =>
  Object.entries(words).map(([value, label]) => ({ value, label }));

/** Uploads one file to a visit: what it shows, how it stands to the original, the file. */
export function UploadSource({ study, visitId }: { study: string; visitId: string }) {
  const id = useId();
  const { unblinded } = useActing();
  const upload = useUploadSource(study, visitId);
  const input = useRef<HTMLInputElement>(null);
  const [kind, setKind] = useState('');
  const [attestation, setAttestation] = useState('');
  const [level, setLevel] = useState<Level>('open');
  const [file, setFile] = useState<Blob | null>(null);
  const [problem, setProblem] = useState<string>();

  const handleFile = (picked: File | undefined): void => {
    const judged = picked === undefined ? null : judgeFile(picked);
    setFile(judged !== null && 'file' in judged ? judged.file : null);
    setProblem(judged !== null && 'problem' in judged ? judged.problem : undefined);
  };
  const handleUpload = (): void => {
    if (file === null) return;
    upload.mutate(
      { file, kind: kind as SourceKind, attestation: attestation as Attestation, level },
      {
        onSuccess: () => {
          say(`Source uploaded: ${sourceKinds[kind as SourceKind]}`);
          setFile(null);
          if (input.current) input.current.value = '';
        },
      },
    );
  };

  return (
    <div className="flex flex-col gap-3 border-t pt-3">
      {upload.error !== null && <ErrorSummary error={upload.error} />}
      <div className="flex flex-wrap items-end gap-4">
        <SelectField
          label="What it shows"
          required
          placeholder="Choose"
          value={kind}
          onChange={(event) => setKind(event.target.value)}
          choices={choicesOf(sourceKinds)}
        />
        <SelectField
          label="How it stands to the original"
          required
          placeholder="Choose"
          value={attestation}
          onChange={(event) => setAttestation(event.target.value)}
          choices={choicesOf(attestations)}
        />
        {unblinded && (
          <SelectField
            label="Who may see it"
            value={level}
            onChange={(event) => setLevel(event.target.value as Level)}
            choices={[
              { value: 'open', label: 'all who read the visit' },
              { value: 'unblinding', label: 'unblinded members only' },
            ]}
          />
        )}
        <div className="flex flex-col gap-1">
          <label htmlFor={id} className="text-sm font-medium">
            File <span className="font-normal text-ink-soft">· required</span>
          </label>
          <input
            ref={input}
            id={id}
            type="file"
            accept={acceptedFiles}
            aria-describedby={`${id}-help`}
            aria-invalid={problem === undefined ? undefined : true}
            className={controlLook}
            onChange={(event) => handleFile(event.target.files?.[0])}
          />
        </div>
        <Button
          variant="primary"
          busy={upload.isPending}
          disabled={file === null || kind === '' || attestation === ''}
          onClick={handleUpload}
        >
          Upload
        </Button>
      </div>
      <p id={`${id}-help`} className="text-sm text-ink-soft">
        {acceptedWords}. Remove names and dates of birth first; the file’s own name is not kept.
      </p>
      {problem !== undefined && <FieldError>{problem}</FieldError>}
    </div>
  );
}
