import { useQuery } from '@tanstack/react-query';
import type { SignaturePreparationDto } from '#schemas/api/records.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { Button } from '../../../components/button.tsx';
import { Caution } from '../../../components/caution.tsx';
import { Dialog } from '../../../components/dialog.tsx';
import { Loaded } from '../../../components/states.tsx';
import { ApiProblem } from '../../../lib/api.ts';
import { shortHash } from '../../../lib/format/numbers.ts';
import { say } from '../../../lib/notices.ts';
import { preparationQuery, useSignVisit } from '../api/signatures.ts';

interface SignVisitDialogProps {
  study: string;
  visitId: string;
  onClose: () => void;
}

/** Shows what a signature would cover, then asks for the password. */
export function SignVisitDialog({ study, visitId, onClose }: SignVisitDialogProps) {
  const query = useQuery(preparationQuery(study, visitId));
  const sign = useSignVisit(study, visitId);
  if (query.data === undefined) {
    return (
      <Dialog
        title="Sign this visit"
        onClose={onClose}
        footer={<Button onClick={onClose}>Leave it as it is</Button>}
      >
        <Loaded query={query} lines={6}>
          {() => null}
        </Loaded>
      </Dialog>
    );
  }
  const { contentHash, preparation, withoutUnblindingValues } = query.data;
  const handleSign = async (password: string): Promise<void> => {
    try {
      await sign.mutateAsync({ contentHash, preparation, password });
      say('The visit is signed');
    } catch (error) {
      // Shown too long ago, or changed since: what would be signed now is shown for another look.
      if (error instanceof ApiProblem && error.status === 412) await query.refetch();
      throw error;
    }
  };
  return (
    <ActDialog
      title="Sign this visit"
      act="Sign this visit"
      reasons={false}
      password
      consequences={<Covered preparation={query.data} />}
      onAct={({ password = '' }) => handleSign(password)}
      onClose={onClose}
    >
      {withoutUnblindingValues && (
        <Caution>
          Values hidden until unblinding are not shown to you. You sign the visit without them, and the
          signature says so.
        </Caution>
      )}
    </ActDialog>
  );
}

function Covered({ preparation }: { preparation: SignaturePreparationDto }) {
  const { meaning, covered, contentHash } = preparation;
  return (
    <>
      <p>You sign this sentence:</p>
      <blockquote className="border-l-3 border-venous pl-3 font-semibold text-soot">{meaning}</blockquote>
      <p>It covers, as they stand now:</p>
      <ul className="max-h-60 list-disc overflow-auto pl-6 text-sm">
        {covered.map(({ type, id, revision, label }) => (
          <li key={type + id}>
            {label}, revision {revision}
          </li>
        ))}
      </ul>
      <p className="text-sm text-ink-soft">
        Content <span className="font-mono text-xs">{shortHash(contentHash)}</span>. A later change shows here
        as changed since it was signed.
      </p>
    </>
  );
}
