import { useQuery } from '@tanstack/react-query';
import { actKinds } from '#schemas/vocabulary/act-kinds.ts';
import { Button } from '../../../components/button.tsx';
import { Card } from '../../../components/card.tsx';
import { SelectField, TextField } from '../../../components/fields.tsx';
import { useUrlState } from '../../../lib/use-url-state.ts';
import { participantIdQuery } from '../api/trail.ts';
import { ChainCheck } from './chain-check.tsx';
import { TrailList } from './trail-list.tsx';

interface TrailViewProps {
  /** Null for the system's trail. */
  study: string | null;
  /** Whether events may be looked up by a participant's code. */
  byParticipant: boolean;
}

const instant = (day: string, time: string): string | undefined =>
  day === '' ? undefined : new Date(`${day}T${time}`).toISOString();

/** A trail: filters kept in the address, the events, and the check of the chain. */
export function TrailView({ study, byParticipant }: TrailViewProps) {
  const [kind, setKind] = useUrlState('kind');
  const [participant, setParticipant] = useUrlState('participant');
  const [subject, setSubject] = useUrlState('subject');
  const [from, setFrom] = useUrlState('from');
  const [to, setTo] = useUrlState('to');
  const asked = byParticipant && participant !== '' && study !== null;
  const found = useQuery({ ...participantIdQuery(study ?? '', participant), enabled: asked, retry: false });
  return (
    <>
      <ChainCheck study={study} />
      <Card flush>
        <div className="flex flex-wrap items-start gap-4 p-4">
          <SelectField
            label="What was done"
            value={kind}
            onChange={(event) => setKind(event.target.value)}
            choices={[
              { value: '', label: 'Anything' },
              ...Object.entries(actKinds).map(([value, label]) => ({ value, label })),
            ]}
          />
          {byParticipant && (
            <ParticipantField
              code={participant}
              error={asked && found.error ? 'No participant that you may see has this code.' : undefined}
              onChange={setParticipant}
            />
          )}
          <TextField
            label="From"
            type="date"
            value={from}
            onChange={(event) => setFrom(event.target.value)}
          />
          <TextField label="To" type="date" value={to} onChange={(event) => setTo(event.target.value)} />
          {subject !== '' && (
            <Button className="mt-6" onClick={() => setSubject('')}>
              All things again, not only {subject.split('/')[0]?.replaceAll('-', ' ')}
            </Button>
          )}
        </div>
        {(!asked || found.data !== undefined) && (
          <TrailList
            study={study}
            filter={{
              kind,
              subject,
              participant: asked ? found.data : undefined,
              from: instant(from, '00:00:00'),
              to: instant(to, '23:59:59.999'),
            }}
            onSubject={setSubject}
          />
        )}
      </Card>
    </>
  );
}

interface ParticipantFieldProps {
  code: string;
  error: string | undefined;
  onChange: (code: string) => void;
}

/** Asked for when the field is left or Enter is pressed, not at each letter. */
function ParticipantField({ code, error, onChange }: ParticipantFieldProps) {
  return (
    <TextField
      label="Participant code"
      defaultValue={code}
      autoComplete="off"
      spellCheck={false}
      error={error}
      onBlur={(event) => onChange(event.target.value.trim())}
      onKeyDown={(event) => {
        if (event.key === 'Enter') onChange(event.currentTarget.value.trim());
      }}
    />
  );
}
