import { rejectionReasonLabel } from '#schemas/vocabulary/rejection-reasons.ts';
import { Button } from '../../components/button.tsx';
import { Dialog } from '../../components/dialog.tsx';

interface SetAsideDialogProps {
  /** "Flow, right arm, reading 3" */
  reading: string;
  reasons: readonly string[];
  onChoose: (reason: string) => void;
  onClose: () => void;
}

/** Marks a reading unusable, for one of the instrument's reasons. It stays on record and can be taken back. */
export function SetAsideDialog({ reading, reasons, onChoose, onClose }: SetAsideDialogProps) {
  return (
    <Dialog
      title={`Set aside: ${reading}`}
      onClose={onClose}
      footer={<Button onClick={onClose}>Leave it counting</Button>}
    >
      <p className="text-sm text-ink-soft">
        The reading stays on record, struck through, and does not count. A reading is never set aside for its
        size alone. Why?
      </p>
      <ul className="flex flex-col gap-1.5">
        {reasons.map((reason) => (
          <li key={reason}>
            <Button className="w-full justify-start" large onClick={() => onChoose(reason)}>
              {rejectionReasonLabel(reason)}
            </Button>
          </li>
        ))}
      </ul>
    </Dialog>
  );
}
