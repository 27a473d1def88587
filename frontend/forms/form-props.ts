import type { FindingDto, Operation } from '#schemas/api/capture.ts';
import type { CompiledInstrument } from '#schemas/instruments/compiled-instrument.ts';
import type { InstrumentSchema } from '#schemas/instruments/instrument.ts';
import type { FormValues } from './form-store.ts';

export interface InstrumentFormProps {
  schema: InstrumentSchema;
  compiled: CompiledInstrument;
  /**
   * Address → value, derived ones included. When the entry was saved, lay the changes still under way over it:
   * whatever stands here replaces what the form shows, except text that is being typed.
   */
  values: FormValues;
  /** Fields that the viewer may not know. */
  hiddenPointers?: readonly string[];
  /** One field or single reading was changed. */
  onOperation: (operation: Operation) => void;
  /** Text typed and not yet a value, to be kept on the device; an empty text forgets it. */
  onDraft?: (draft: { pointer: string; text: string }) => void;
  /** Drafts kept from before, address → text. */
  drafts?: Readonly<Record<string, string>>;
  /** What the server's checks say. */
  findings?: readonly FindingDto[];
  /** Keeps a value that a soft check asks about. */
  onConfirm?: (finding: FindingDto, reason: string) => void;
  readOnly?: boolean;
  /** Where the server's compiled validator is; without it conditional fields are all shown. */
  validatorUrl?: string;
  /** IANA zone of the site, for times. */
  zone?: string;
}
