import { useEffect } from 'react';
import type { FindingDto } from '#schemas/api/capture.ts';
import { toDocument } from '#schemas/instruments/document.ts';
import { describeSchemaError } from '#schemas/instruments/schema-error.ts';
import type { FormStore } from './form-store.ts';
import type { FormValidator } from './load-validator.ts';

const none: readonly FindingDto[] = [];
/** What an entry still lacks is no fault while it is being filled in. */
const ofUnfinished = new Set(['required', 'dependentRequired', 'minItems']);

/** Shows what the schema says of each value as it comes in, beside the server's findings, in the same words. */
export function useSchemaFindings(
  store: FormStore,
  validator: FormValidator,
  findings: readonly FindingDto[] = none,
): void {
  useEffect(() => {
    const judge = () => store.setFindings(merged(findings, schemaFindings(store, validator)));
    judge();
    return store.subscribeToChanges(judge);
  }, [store, validator, findings]);
}

function schemaFindings({ compiled, entryValues }: FormStore, { errorsOf }: FormValidator): FindingDto[] {
  const { document, addressOf } = toDocument(compiled, entryValues());
  return errorsOf(document)
    .filter(({ keyword }) => !ofUnfinished.has(keyword))
    .flatMap((error) => describeSchemaError(compiled, error, addressOf) ?? []);
}

/** The server judged the same value by the same schema: said once. */
function merged(server: readonly FindingDto[], own: readonly FindingDto[]): FindingDto[] {
  const said = new Set(
    server.flatMap(({ pointers, message }) => pointers.map((pointer) => pointer + message)),
  );
  return [
    ...server,
    ...own.filter(({ pointers, message }) => !pointers.every((pointer) => said.has(pointer + message))),
  ];
}
