/** Limits of agreement: the bias and z standard deviations of the differences to either side. */
export function agreementLimits(bias: number, sd: number, z: number) {
  return { bias, sd_difference: sd, lower_limit: bias - z * sd, upper_limit: bias + z * sd };
}
