import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useEffect, useEffectEvent } from 'react';
import { Progress } from '../../../components/progress.tsx';
import { StateMark } from '../../../components/pen-mark.tsx';
import { jobQuery, useCancelJob } from '../api/analysis.ts';

interface JobProgressProps {
  study: string;
  jobKey: string;
  label: string;
  noun: string;
  onDone: () => void;
}

/** A piece of long work by counts, with a way to stop it. */
export function JobProgress({ study, jobKey, label, noun, onDone }: JobProgressProps) {
  const { data } = useQuery(jobQuery(study, jobKey));
  const client = useQueryClient();
  const cancel = useCancelJob(study);
  const state = data?.state ?? 'queued';
  const done = useEffectEvent(onDone);
  useEffect(() => {
    if (state !== 'done') return;
    void client.invalidateQueries({ queryKey: ['cuts', study] });
    done();
  }, [state, client, study]);
  if (state === 'done') return <StateMark state="settled" word={`${label}: done`} />;
  if (state === 'failed') return <StateMark state="asks" word={`${label}: failed; ask for it again`} />;
  if (state === 'cancelled') return <StateMark state="late" word={`${label}: stopped`} />;
  return (
    <Progress
      label={label}
      done={data?.done ?? 0}
      total={data?.total ?? undefined}
      noun={noun}
      onCancel={() => cancel.mutate(jobKey)}
    />
  );
}
