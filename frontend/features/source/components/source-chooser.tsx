import { useQuery } from '@tanstack/react-query';
import type { SourceDocumentDto } from '#schemas/api/source.ts';
import { sourceKinds } from '#schemas/vocabulary/source-kinds.ts';
import { Card } from '../../../components/card.tsx';
import { Caution } from '../../../components/caution.tsx';
import { SelectField } from '../../../components/fields.tsx';
import { EmptyState, Loaded } from '../../../components/states.tsx';
import { formatMoment } from '../../../lib/format/dates.ts';
import { useZone } from '../../../lib/session/session.ts';
import { sourcesQuery } from '../api/source.ts';
import { SourceView } from './source-view.tsx';

interface SourceChooserProps {
  study: string;
  visitId: string;
  /** Empty for the first that was not replaced. */
  chosen: string;
  onChoose: (id: string) => void;
}

/** The source documents of a visit, one of them shown. */
export function SourceChooser({ study, visitId, chosen, onChoose }: SourceChooserProps) {
  const query = useQuery(sourcesQuery(study, visitId));
  const zone = useZone();
  return (
    <Card title="Source">
      <Loaded query={query} lines={10}>
        {(documents) => {
          const document = chosenDocument(documents, chosen);
          if (document === undefined)
            return (
              <EmptyState title="No source document yet">
                <p>The coordinator uploads them on the visit’s page. Values are compared with a document.</p>
              </EmptyState>
            );
          return (
            <div className="flex flex-col gap-2">
              <SelectField
                label="Document"
                value={document.id}
                onChange={(event) => onChoose(event.target.value)}
                choices={documents.map(({ id, kind, uploadedAt, replacedById }) => ({
                  value: id,
                  label: `${sourceKinds[kind]}, ${formatMoment(uploadedAt, zone)}${replacedById === null ? '' : ', replaced'}`,
                }))}
              />
              {document.replacedById !== null && (
                <Caution>This document was replaced; compare with the newer one.</Caution>
              )}
              {document.attestation === 'uncertified-copy' && (
                <Caution>An uncertified copy: nobody has compared it with the original.</Caution>
              )}
              <SourceView key={document.id} study={study} document={document} />
            </div>
          );
        }}
      </Loaded>
    </Card>
  );
}

/** The document of an id; without one, the first that stands. */
function chosenDocument(
  documents: readonly SourceDocumentDto[],
  chosen: string,
): SourceDocumentDto | undefined {
  return (
    documents.find(({ id }) => id === chosen) ??
    documents.find(({ replacedById }) => replacedById === null) ??
    documents[0]
  );
}

/** The id of the document that values are compared with: shown, and not replaced. */
export function useComparedSource(study: string, visitId: string, chosen: string): string | null {
  const { data } = useQuery(sourcesQuery(study, visitId));
  const document = chosenDocument(data ?? [], chosen);
  return document?.replacedById === null ? document.id : null;
}
