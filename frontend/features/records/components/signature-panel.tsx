import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { SignatureDto } from '#schemas/api/records.ts';
import { Button } from '../../../components/button.tsx';
import { Card } from '../../../components/card.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { EmptyState, Loaded } from '../../../components/states.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { shortHash } from '../../../lib/format/numbers.ts';
import { useMay } from '../../../lib/session/ability.ts';
import { useActing, useZone } from '../../../lib/session/session.ts';
import { signaturesQuery } from '../api/signatures.ts';
import { SignVisitDialog } from './sign-visit-dialog.tsx';

interface SignaturePanelProps {
  study: string;
  visitId: string;
  /** Only a completed visit is signed. */
  completed: boolean;
}

/** The signatures of a visit, and whether what was signed is still what lies there. */
export function SignaturePanel({ study, visitId, completed }: SignaturePanelProps) {
  const query = useQuery(signaturesQuery(study, visitId));
  const may = useMay();
  const { studyState } = useActing();
  const [signing, setSigning] = useState(false);
  const maySign = completed && studyState === 'running' && may('sign', 'Visit');
  return (
    <Card
      title="Signatures"
      actions={
        maySign ? (
          <Button variant="primary" onClick={() => setSigning(true)}>
            Sign this visit
          </Button>
        ) : undefined
      }
    >
      <Loaded query={query} lines={2}>
        {(signatures) =>
          signatures.length === 0 ? (
            <EmptyState title="Not signed yet">
              <p>
                {completed
                  ? 'The principal investigator signs it.'
                  : 'It can be signed by the principal investigator once it is completed.'}
              </p>
            </EmptyState>
          ) : (
            <ul className="flex flex-col gap-3">
              {signatures.map((signature) => (
                <SignatureLine key={signature.id} signature={signature} />
              ))}
            </ul>
          )
        }
      </Loaded>
      {signing && <SignVisitDialog study={study} visitId={visitId} onClose={() => setSigning(false)} />}
    </Card>
  );
}

function SignatureLine({ signature }: { signature: SignatureDto }) {
  const zone = useZone();
  const { signerName, role, signedAt, meaning, contentHash, state, changed } = signature;
  return (
    <li className="border-l-3 border-rule pl-3">
      <p>
        <strong>{signerName}</strong>, {role.replaceAll('-', ' ')},{' '}
        <time dateTime={signedAt}>{formatMoment(signedAt, zone, { seconds: true })}</time>
      </p>
      <p className="text-sm text-ink-soft">
        “{meaning}” · <span className="font-mono text-xs">{shortHash(contentHash)}</span>
      </p>
      {state === 'covers' ? (
        <StateMark state="settled" word="covers what lies here now" />
      ) : (
        <>
          <StateMark state="asks" word="changed since it was signed" />
          <ul className="list-disc pl-6 text-sm">
            {changed.map((label) => (
              <li key={label}>{label}</li>
            ))}
          </ul>
        </>
      )}
    </li>
  );
}
