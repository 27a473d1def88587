import { useState } from 'react';
import type { StudyDto } from '#schemas/api/studies.ts';
import { ActDialog } from '#frontend/components/act-dialog.tsx';
import { TextField } from '#frontend/components/fields.tsx';
import { useStudyActs } from '../api/studies.ts';
import { codeFrom } from '../model/study-words.ts';
import { useRefusals } from '#frontend/lib/use-refusals.ts';

/** Makes a study; its code stands in every address and never changes. */
export function CreateStudyDialog({
  onMade,
  onClose,
}: {
  onMade: (study: StudyDto) => void;
  onClose: () => void;
}) {
  const { create } = useStudyActs();
  const [name, setName] = useState('');
  const [title, setTitle] = useState('');
  const [code, setCode] = useState<string>();
  const [refused, run] = useRefusals();
  const wanted = code ?? codeFrom(name);
  return (
    <ActDialog
      title="Make a study"
      act="Make the study"
      reasons={false}
      consequences={
        <p>
          The study begins in setting-up, with an audit trail of its own. Next come its sites and its members;
          the principal investigator then publishes instruments and protocol and opens it for enrolment.
        </p>
      }
      onAct={async () =>
        onMade(await run(() => create({ code: wanted, name: name.trim(), title: title.trim() })))
      }
      onClose={onClose}
    >
      <TextField
        label="Name"
        help="Short, as people say it."
        required
        maxLength={80}
        value={name}
        onChange={(event) => setName(event.target.value)}
        error={refused['/name']}
      />
      <TextField
        label="Title"
        required
        maxLength={300}
        value={title}
        onChange={(event) => setTitle(event.target.value)}
        error={refused['/title']}
      />
      <TextField
        label="Code"
        help="3 to 40 small letters, digits and hyphens. It cannot be changed later."
        required
        spellCheck={false}
        autoComplete="off"
        value={wanted}
        onChange={(event) => setCode(event.target.value.toLowerCase())}
        error={refused['/code']}
      />
    </ActDialog>
  );
}

/** Another name or title, with the reason. */
export function RenameStudyDialog({ study, onClose }: { study: StudyDto; onClose: () => void }) {
  const { rename } = useStudyActs();
  const [name, setName] = useState(study.name);
  const [title, setTitle] = useState(study.title);
  const [refused, run] = useRefusals();
  return (
    <ActDialog
      title={`Change ${study.name}`}
      act="Change the study"
      consequences={<p>Every page of the study shows the new words; the old ones stay in its audit trail.</p>}
      onAct={({ reason }) => run(() => rename(study, { name: name.trim(), title: title.trim(), reason }))}
      onClose={onClose}
    >
      <TextField
        label="Name"
        required
        maxLength={80}
        value={name}
        onChange={(event) => setName(event.target.value)}
        error={refused['/name']}
      />
      <TextField
        label="Title"
        required
        maxLength={300}
        value={title}
        onChange={(event) => setTitle(event.target.value)}
        error={refused['/title']}
      />
    </ActDialog>
  );
}
