import type { MixedModelFit } from './fit.ts';
import type { FixedPartInference } from './fixed-part-inference.ts';
import { kenwardRoger } from './kenward-roger.ts';
import { satterthwaite } from './satterthwaite.ts';

/** Tests and intervals of a fitted model with approximate degrees of freedom. */
export function inferenceOf(
  fit: MixedModelFit,
  method: 'satterthwaite' | 'kenward_roger' = 'satterthwaite',
): FixedPartInference {
  return method === 'kenward_roger' ? kenwardRoger(fit) : satterthwaite(fit);
}
