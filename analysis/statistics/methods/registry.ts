import type { Method } from '../core/method.ts';
import type { MethodName } from '../core/plan.ts';
import { allometricScaling } from './allometric-scaling.ts';
import { ancovaChange } from './ancova-change.ts';
import { blandAltman } from './bland-altman.ts';
import { bootstrapCi } from './bootstrap-ci.ts';
import { correlationWithinSubject } from './correlation-within-subject.ts';
import { crossover2x2 } from './crossover-2x2.ts';
import { doseResponse } from './dose-response.ts';
import { equivalencePaired } from './equivalence-paired.ts';
import { friedman } from './friedman.ts';
import { geometricMeanRatio } from './geometric-mean-ratio.ts';
import { groupShare } from './group-share.ts';
import { icc } from './icc.ts';
import { linearMixedModel } from './linear-mixed-model.ts';
import { mixedAnova } from './mixed-anova.ts';
import { multiplicity } from './multiplicity.ts';
import { oneWayRmAnova } from './one-way-rm-anova.ts';
import { pairedDeltaAdjusted } from './paired-delta-adjusted.ts';
import { pairedT } from './paired-t.ts';
import { permutationPaired } from './permutation-paired.ts';
import { powerCrossover } from './power-crossover.ts';
import { powerPairedT } from './power-paired-t.ts';
import { repeatability } from './repeatability.ts';
import { shapiroWilk } from './shapiro-wilk.ts';
import { signTest } from './sign-test.ts';
import { twoWayRmAnova } from './two-way-rm-anova.ts';
import { wilcoxonSignedRank } from './wilcoxon-signed-rank.ts';

const list: readonly Method[] = [
  pairedT,
  wilcoxonSignedRank,
  signTest,
  oneWayRmAnova,
  twoWayRmAnova,
  mixedAnova,
  friedman,
  crossover2x2,
  linearMixedModel,
  ancovaChange,
  blandAltman,
  icc,
  repeatability,
  equivalencePaired,
  bootstrapCi,
  groupShare,
  pairedDeltaAdjusted,
  permutationPaired,
  shapiroWilk,
  powerPairedT,
  powerCrossover,
  allometricScaling,
  geometricMeanRatio,
  correlationWithinSubject,
  doseResponse,
  multiplicity,
];

/** Every method by its name. */
export const methods = Object.fromEntries(list.map((method) => [method.name, method])) as Readonly<
  Record<MethodName, Method>
>;
