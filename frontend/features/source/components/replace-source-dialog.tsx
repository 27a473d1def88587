import { useState } from 'react';
import type { SourceDocumentDto } from '#schemas/api/source.ts';
import { sourceKinds } from '#schemas/vocabulary/source-kinds.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { SelectField } from '../../../components/fields.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { useZone } from '../../../lib/session/session.ts';
import { useReplaceSource } from '../api/source.ts';

interface ReplaceSourceDialogProps {
  study: string;
  older: SourceDocumentDto;
  /** Other documents of the visit that stand. */
  others: readonly SourceDocumentDto[];
  onClose: () => void;
}

/** Puts another document in the place of this one, with a reason. */
export function ReplaceSourceDialog({ study, older, others, onClose }: ReplaceSourceDialogProps) {
  const replace = useReplaceSource(study, older.visitId);
  const [newer, setNewer] = useState(others.at(-1)?.id ?? '');
  const zone = useZone();
  return (
    <ActDialog
      title={`Replace: ${sourceKinds[older.kind]}`}
      act="Replace the document"
      consequences={
        <p>
          The document stays and can still be read, marked as replaced. Every verification mark that was set
          against it falls, and those values are compared again.
        </p>
      }
      onAct={({ reason }) => replace.mutateAsync({ newer, older, reason })}
      onClose={onClose}
    >
      <SelectField
        label="In its place stands"
        required
        value={newer}
        onChange={(event) => setNewer(event.target.value)}
        choices={others.map(({ id, kind, uploadedAt }) => ({
          value: id,
          label: `${sourceKinds[kind]}, ${formatMoment(uploadedAt, zone)}`,
        }))}
      />
    </ActDialog>
  );
}
