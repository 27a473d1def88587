import { useQuery } from '@tanstack/react-query';
import { useNavigate } from 'react-router-dom';
import { Button } from '../../../components/button.tsx';
import { say } from '../../../lib/notices.ts';
import { inWords } from '../../../components/error-summary.tsx';
import { useSavePlan } from '../api/analysis.ts';
import { planBasisQuery } from '../api/plan-basis.ts';
import { planTemplate, type PlanBasis } from '../model/plan-template.ts';

/** Where no protocol is published yet. */
const noBasis: PlanBasis = { title: 'New plan', design: 'crossover-2x2', conditions: [], visitTypes: [] };

const newSeed = (): number => crypto.getRandomValues(new Uint32Array(1))[0]! >>> 1;

/** Begins a plan with what the protocol settles, and opens it. */
export function NewPlanButton({ study }: { study: string }) {
  const basis = useQuery(planBasisQuery(study));
  const save = useSavePlan(study);
  const navigate = useNavigate();
  const handleNew = async (): Promise<void> => {
    try {
      const content = planTemplate(basis.data ?? noBasis, newSeed());
      const { data } = await save.mutateAsync({ name: 'Primary analysis', content });
      await navigate(`/studies/${study}/plans/${data.id}`);
    } catch (error) {
      const { title, detail } = inWords(error);
      say(`The plan was not begun. ${title}: ${detail}`, 'asks');
    }
  };
  return (
    <Button
      variant="primary"
      busy={save.isPending}
      disabled={basis.isPending}
      onClick={() => void handleNew()}
    >
      New plan
    </Button>
  );
}
