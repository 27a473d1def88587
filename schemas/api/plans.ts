/** A plan: what is compared, on which outcomes, with which law and method, decided before the data are seen. */
export interface StudyPlan {
  title: string;
  [member: string]: unknown;
}
