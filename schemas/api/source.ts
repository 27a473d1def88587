import { levels, type Level } from '../vocabulary/states.ts';
import {
  attestations,
  sourceKinds,
  type Attestation,
  type SourceKind,
  type SourceType,
} from '../vocabulary/source-kinds.ts';

const object = { type: 'object', additionalProperties: false } as const;

export const uploadSourceQuery = {
  ...object,
  required: ['kind', 'attestation'],
  properties: {
    kind: { enum: Object.keys(sourceKinds) },
    attestation: { enum: Object.keys(attestations) },
    level: { enum: levels },
  },
} as const;
export interface UploadSourceQuery {
  kind: SourceKind;
  attestation: Attestation;
  level?: Level;
}

export const replaceSourceBody = {
  ...object,
  required: ['replaces', 'reason'],
  properties: {
    replaces: { type: 'string', format: 'uuid' },
    reason: { type: 'string', minLength: 3, maxLength: 2000, pattern: '\\S[^]*\\S' },
  },
} as const;
export interface ReplaceSourceBody {
  replaces: string;
  reason: string;
}

export interface SourceDocumentDto {
  id: string;
  visitId: string;
  kind: SourceKind;
  mediaType: SourceType;
  size: number;
  sha256: string;
  level: Level;
  attestation: Attestation;
  uploadedBy: string;
  uploadedAt: string;
  replacedById: string | null;
  revision: number;
}
