import type { EntityManager } from '@mikro-orm/postgresql';
import type { TextProblemDto } from '#schemas/api/instruments.ts';
import { jsonPlaces } from '#schemas/json/json-places.ts';
import { checkProtocol } from '#schemas/protocol/check-protocol.ts';
import { withUnblindingSpread } from '#schemas/protocol/protocol-levels.ts';
import { protocolSchema } from '#schemas/protocol/protocol-schema.ts';
import type { Protocol, ProtocolProblem } from '#schemas/protocol/protocol.ts';
import { problemsOf } from '#backend/http/validate.ts';
import { instrumentLibrary, jsonProblems, newestInstruments, placedProblem } from '../instruments/index.ts';
import { SiteSchema } from '../studies/site.entity.ts';

export interface ProtocolJudgement {
  problems: TextProblemDto[];
  /** With `unblinding` spread along what it comes from, once there are no problems. */
  content: Protocol | null;
}

/** Judges a protocol's text against its schema, the published instruments and the study's sites. */
export async function judgeProtocol(
  em: EntityManager,
  studyId: string,
  text: string,
): Promise<ProtocolJudgement> {
  const places = jsonPlaces(text);
  if (places.problems.length > 0) return { problems: jsonProblems(text, places), content: null };
  const refused = (problems: ProtocolProblem[]): ProtocolJudgement => ({
    problems: problems.map((problem) => placedProblem(text, places, problem, 'error')),
    content: null,
  });
  const value: unknown = JSON.parse(text);
  const shape = problemsOf(protocolSchema, value).map(({ pointer, detail }) => ({
    pointer,
    message: sentence(pointer, detail),
  }));
  if (shape.length > 0) return refused(shape);
  const protocol = value as Protocol;
  const published = await newestInstruments(em, studyId);
  const instruments = new Map([...published].map(([key, { compiled }]) => [key, compiled]));
  const problems = [
    ...checkProtocol(protocol, instruments, instrumentLibrary),
    ...siteProblems(protocol, await em.find(SiteSchema, { studyId })),
  ];
  return problems.length > 0
    ? refused(problems)
    : { problems: [], content: withUnblindingSpread(protocol, instruments) };
}

/** A site of the protocol is named by its name in small letters: `Tarn Nook` is `tarn-nook`. */
const siteKey = (name: string): string =>
  name
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, '-')
    .replaceAll(/^-|-$/g, '');

function siteProblems({ sites }: Protocol, known: readonly { name: string }[]): ProtocolProblem[] {
  const keys = known.map(({ name }) => siteKey(name));
  return sites.flatMap((site, index) =>
    keys.includes(site)
      ? []
      : [
          {
            pointer: `/sites/${index}`,
            message: `The study has no site ${site}; it has ${keys.join(', ') || 'none yet: the administrator adds them'}`,
          },
        ],
  );
}

/** `must be integer` alone says nothing of whom. */
const sentence = (pointer: string, detail: string): string =>
  `${pointer.split('/').at(-1) || 'The protocol'} ${detail.replace('is not a field of this request', 'is no part of a protocol')}`;
