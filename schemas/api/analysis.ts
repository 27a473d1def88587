const object = { type: 'object', additionalProperties: false } as const;
const uuid = { type: 'string', format: 'uuid' } as const;
const password = { type: 'string', maxLength: 1024 } as const;

export const savePlanBody = {
  ...object,
  required: ['name', 'content'],
  properties: { name: { type: 'string', minLength: 1, maxLength: 120 }, content: { type: 'object' } },
} as const;
export interface SavePlanBody {
  name: string;
  content: unknown;
}

export const signPlanBody = { ...object, required: ['password'], properties: { password } } as const;
export interface SignPlanBody {
  password: string;
}

export const requestCutBody = {
  ...object,
  required: ['kind'],
  properties: { kind: { enum: ['rehearsal', 'final'] } },
} as const;
export interface RequestCutBody {
  kind: 'rehearsal' | 'final';
}

export const requestRunBody = {
  ...object,
  required: ['cutId'],
  properties: { cutId: uuid, planVersionId: uuid, planDraftId: uuid },
  oneOf: [{ required: ['planVersionId'] }, { required: ['planDraftId'] }],
} as const;
export interface RequestRunBody {
  cutId: string;
  planVersionId?: string;
  planDraftId?: string;
}

/** How far a long piece of work is. */
export interface ProgressDto {
  jobKey: string;
  state: 'queued' | 'running' | 'done' | 'failed' | 'cancelled';
  done: number;
  total: number | null;
  detail: string | null;
}

export interface PlanDto {
  id: string;
  name: string;
  revision: number;
  /** A `StudyPlan`, possibly not yet valid. */
  content: unknown;
  problems: { pointer: string; message: string }[];
  author: string;
  versions: PlanVersionDto[];
}

export interface PlanVersionDto {
  id: string;
  version: number;
  name: string;
  hash: string;
  signedBy: string;
  signedAt: string;
  studyStateThen: string;
}

export interface CutDto {
  id: string;
  number: number;
  kind: 'rehearsal' | 'final';
  studyStateThen: string;
  sha256: string;
  madeBy: string;
  madeAt: string;
  manifest: Record<string, unknown>;
}

export interface RunDto {
  id: string;
  number: number;
  state: 'waiting' | 'running' | 'done' | 'failed' | 'cancelled';
  /** Signed before the lock, signed later, or a draft that is rehearsed. */
  standing: 'planned' | 'post-hoc' | 'rehearsal';
  plan: { name: string; version: number | null; hash: string; signedAt: string | null; content: unknown };
  cut: { id: string; number: number; kind: 'rehearsal' | 'final'; sha256: string };
  engineVersion: string;
  seed: number;
  requestedBy: string;
  requestedAt: string;
  resultSha256: string | null;
  failure: string | null;
  progress: ProgressDto | null;
}
