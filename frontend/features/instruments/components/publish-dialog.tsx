import type { DraftDto, VerdictDto, VersionDto } from '#schemas/api/instruments.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { useDraftActs } from '../api/instruments.ts';
import { DifferenceTable } from './difference-table.tsx';

interface PublishDialogProps {
  studyCode: string;
  draft: DraftDto;
  verdict: VerdictDto;
  /** Stores what is typed and answers with its revision. */
  save: () => Promise<number | undefined>;
  onPublished: (version: VersionDto) => void;
  onClose: () => void;
}

/** Publishes the draft as the next version, after showing what it changes. */
export function PublishDialog({ studyCode, draft, verdict, save, onPublished, onClose }: PublishDialogProps) {
  const { publish } = useDraftActs(studyCode);
  const next = (draft.baseVersion ?? 0) + 1;
  return (
    <ActDialog
      title={`Publish ${draft.title}`}
      act={`Publish version ${next}`}
      reasons={next === 1 ? ['first version'] : []}
      consequences={
        <>
          <p>
            Version {next} never changes again. Entries made from now on use it; those made before keep the
            version they were made with.{' '}
            {verdict.samples.length === 1 ? 'One sample' : `${verdict.samples.length} samples`} came out as
            said and stay with it.
          </p>
          {next > 1 && (
            <DifferenceTable
              query={{ data: verdict.differences, error: null, refetch: () => undefined }}
              empty="No field differs; only samples do"
            />
          )}
        </>
      }
      onAct={async ({ reason }) => {
        const revision = await save();
        if (revision === undefined)
          throw new Error('The draft could not be saved first; see beside the editor.');
        onPublished(await publish(draft.id, reason, revision));
      }}
      onClose={onClose}
    />
  );
}
