import { fUpperTail } from '../../numerics/f-distribution.ts';
import type { Sphericity } from './sphericity.ts';

/** A line of a repeated-measures table of variance. */
export type AnovaRow = {
  ss_effect: number;
  df_effect: number;
  ss_error: number;
  df_error: number;
  f: number;
  p_value: number;
  mauchly_w: number | null;
  mauchly_p: number | null;
  gg_epsilon: number | null;
  hf_epsilon: number | null;
  df_effect_gg: number | null;
  df_error_gg: number | null;
  p_gg: number | null;
  df_effect_hf: number | null;
  df_error_hf: number | null;
  p_hf: number | null;
  partial_eta_squared: number;
  generalised_eta_squared: number;
};

/**
 * F test of an effect against its error, with both corrections for sphericity where it is within subjects.
 *
 * @param total sum of squares of the effect and of all error terms: the base of the generalised eta squared
 */
export function anovaRow(
  effect: { ss: number; df: number },
  error: { ss: number; df: number },
  { total, sphericity }: { total: number; sphericity: Sphericity | null },
): AnovaRow {
  const f = effect.ss / effect.df / (error.ss / error.df);
  const corrected = (epsilon: number | null) => {
    if (epsilon === null) return { dfEffect: null, dfError: null, p: null };
    const [dfEffect, dfError] = [epsilon * effect.df, epsilon * error.df];
    return { dfEffect, dfError, p: fUpperTail(f, dfEffect, dfError) };
  };
  const hf = sphericity?.hf ?? null;
  const byGg = corrected(sphericity?.gg ?? null);
  const byHf = corrected(hf === null ? null : Math.min(1, hf));
  return {
    ss_effect: effect.ss,
    df_effect: effect.df,
    ss_error: error.ss,
    df_error: error.df,
    f,
    p_value: fUpperTail(f, effect.df, error.df),
    mauchly_w: sphericity?.mauchlyW ?? null,
    mauchly_p: sphericity?.mauchlyP ?? null,
    gg_epsilon: sphericity?.gg ?? null,
    hf_epsilon: hf,
    df_effect_gg: byGg.dfEffect,
    df_error_gg: byGg.dfError,
    p_gg: byGg.p,
    df_effect_hf: byHf.dfEffect,
    df_error_hf: byHf.dfError,
    p_hf: byHf.p,
    partial_eta_squared: effect.ss / (effect.ss + error.ss),
    generalised_eta_squared: effect.ss / total,
  };
}
