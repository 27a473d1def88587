import { useEffect, useState } from 'react';
import { FormStore } from './form-store.ts';
import type { InstrumentFormProps } from './form-props.ts';

type StoreProps = Pick<
  InstrumentFormProps,
  'compiled' | 'values' | 'hiddenPointers' | 'onOperation' | 'onDraft' | 'drafts'
>;

/** The form's store, filled before the first drawing; another instrument gets another one. */
export function useFormStore(props: StoreProps): FormStore {
  const { compiled, values, hiddenPointers, onOperation, onDraft } = props;
  const [made, setMade] = useState(() => filledStore(props));
  const store = made.compiled === compiled ? made : filledStore(props);
  if (store !== made) setMade(store);
  useEffect(() => store.setHandlers({ onOperation, onDraft }), [store, onOperation, onDraft]);
  useEffect(() => store.setValues(values, hiddenPointers), [store, values, hiddenPointers]);
  return store;
}

function filledStore({
  compiled,
  values,
  hiddenPointers,
  onOperation,
  onDraft,
  drafts = {},
}: StoreProps): FormStore {
  const store = new FormStore({ compiled, onOperation, onDraft });
  store.setValues(values, hiddenPointers);
  store.restoreDrafts(drafts);
  return store;
}
