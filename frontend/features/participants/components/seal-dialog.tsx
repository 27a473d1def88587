import { useState } from 'react';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { CheckboxField, TextField } from '#frontend/components/fields.tsx';
import { say } from '#frontend/lib/notices.ts';
import { useAllocationActs } from '../api/allocation.ts';

interface SealDialogProps {
  studyCode: string;
  /** Number of sequences: block sizes are its multiples. */
  sequences: number;
  sites: number;
  onClose: () => void;
}

/** Makes the list and seals it. The block sizes chosen here are sealed with it and shown to nobody. */
export function SealDialog({ studyCode, sequences, sites, onClose }: SealDialogProps) {
  const { seal } = useAllocationActs(studyCode);
  const sizes = [1, 2, 3, 4].map((times) => times * sequences);
  const [chosen, setChosen] = useState<number[]>([sizes[0]!, sizes[1]!]);
  const [slots, setSlots] = useState('');
  const slotsPerSite = /^\d{1,3}$/.test(slots) ? Number(slots) : 0;

  return (
    <ActDialog
      title="Make and seal the allocation list"
      consequences={
        <>
          <p>
            The list is drawn by a cryptographic generator in random blocks, and sealed in the same moment. It
            is made once and cannot be made again. Nobody sees it, you neither: you will see each
            participant’s condition once a place is assigned.
          </p>
          <p>
            Its digest is published at once, so that it can be proved later that nothing in it was changed.
          </p>
        </>
      }
      act="Make and seal the list"
      reasons={false}
      onAct={async () => {
        if (chosen.length === 0) throw new Error('Choose at least one block size.');
        if (slotsPerSite === 0)
          throw new Error('Say how many places each site gets: a number from 1 to 500.');
        await seal({ blockSizes: chosen, slotsPerSite });
        say('The allocation list is sealed');
      }}
      onClose={onClose}
    >
      <fieldset className="flex flex-col gap-1.5">
        <legend className="mb-1 text-sm font-medium">Block sizes, drawn at random among those ticked</legend>
        {sizes.map((size) => (
          <CheckboxField
            key={size}
            label={`${size}`}
            checked={chosen.includes(size)}
            onChange={({ target }) =>
              setChosen(
                target.checked
                  ? [...chosen, size].sort((a, b) => a - b)
                  : chosen.filter((one) => one !== size),
              )
            }
          />
        ))}
        <p className="text-sm text-ink-soft">
          More than one, so that the end of a block cannot be foreseen. Tell nobody which.
        </p>
      </fieldset>
      <TextField
        label="Places for each site"
        required
        inputMode="numeric"
        className="w-64"
        value={slots}
        onChange={(event) => setSlots(event.target.value.trim())}
        help={slotsPerSite > 0 ? `${slotsPerSite * sites} in all` : 'More than will be needed'}
      />
    </ActDialog>
  );
}
