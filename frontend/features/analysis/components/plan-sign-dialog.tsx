import type { PlanDto } from '#schemas/api/analysis.ts';
import { ActDialog } from '../../../components/act-dialog.tsx';
import { say } from '../../../lib/notices.ts';
import { useActing } from '../../../lib/session/session.ts';
import { useSignPlan } from '../api/analysis.ts';

interface PlanSignDialogProps {
  study: string;
  plan: PlanDto;
  onClose: () => void;
}

/** Signs the plan as it was saved. */
export function PlanSignDialog({ study, plan, onClose }: PlanSignDialogProps) {
  const sign = useSignPlan(study);
  const { studyState } = useActing();
  const handleSign = async (password: string): Promise<void> => {
    const { data } = await sign.mutateAsync({ id: plan.id, revision: plan.revision, password });
    say(`Signed: ${data.name}, version ${data.version}`);
  };
  return (
    <ActDialog
      title={`Sign ${plan.name}`}
      act="Sign the plan"
      reasons={false}
      password
      consequences={
        <>
          <p>
            Revision {plan.revision} becomes version {(plan.versions[0]?.version ?? 0) + 1}. It can be carried
            out and read by all who see the analysis, and it never changes; a later change is a new version.
          </p>
          <p>
            {studyState === 'running'
              ? 'The study is running, so what it finds counts as planned.'
              : 'The study is not running, so what it finds is marked POST HOC.'}
          </p>
          <blockquote className="border-l-3 border-venous pl-3 font-semibold text-soot">
            I have written this plan and it is to be carried out as it stands.
          </blockquote>
        </>
      }
      onAct={({ password = '' }) => handleSign(password)}
      onClose={onClose}
    />
  );
}
