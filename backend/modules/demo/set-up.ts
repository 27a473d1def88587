import type { Protocol } from '#schemas/protocol/protocol.ts';
import type { Deps } from '#backend/http/deps.ts';
import { publishDraft, startDraft } from '../instruments/index.ts';
import { publishProtocol, saveProtocolDraft, startEnrolment, startProtocolDraft } from '../protocol/index.ts';
import { addSite, createStudy } from '../studies/index.ts';
import { StudySchema } from '../studies/study.entity.ts';
import { asSystemDoes, cast, type People } from './cast.ts';
import type { Player } from './stage.ts';

export interface DemoStudy {
  id: string;
  code: string;
  sites: Map<string, { id: string; code: string; timeZone: string }>;
  investigator: Player;
  coordinator: Player;
  technician: Player;
  physician: Player;
  statistician: Player;
  monitor: Player;
}

interface NewSite {
  code: string;
  name: string;
  timeZone: string;
}

/** Creates a study with its sites and people; nothing is published yet. */
export async function createDemoStudy(
  deps: Deps,
  people: People,
  facts: { code: string; name: string; title: string; sites: NewSite[] },
): Promise<DemoStudy> {
  const { code, name, title } = facts;
  const study = await asSystemDoes(deps, (em) => createStudy(em, { code, name, title }));
  const sites: DemoStudy['sites'] = new Map();
  for (const site of facts.sites) {
    const row = await asSystemDoes(deps, (em) => addSite(em, study.id, site));
    sites.set(site.code, { id: row.id, code: site.code, timeZone: site.timeZone });
  }
  const play = (person: string, role: Parameters<typeof cast>[2], siteIds: string[] | null = null) =>
    cast(deps, people.get(person), role, study.id, siteIds);
  return {
    id: study.id,
    code,
    sites,
    investigator: await play('petra.inkwell', 'principal-investigator'),
    coordinator: await play('ivo.varro', 'coordinator'),
    technician: await play('tove.okoro-lind', 'unblinded-technician'),
    physician: await play('dario.fenwick', 'study-physician'),
    statistician: await play('bela.ferreol', 'statistician'),
    monitor: await play('mina.ostler', 'monitor'),
  };
}

/** Publishes what a protocol uses from the library, then the protocol, and opens the study for enrolment. */
export async function publishStudy({ investigator, id }: DemoStudy, protocol: Protocol): Promise<void> {
  const used = new Set([
    ...protocol.visitTypes.flatMap(({ runSheet }) => runSheet.flatMap(({ instrument }) => instrument ?? [])),
    ...protocol.participantLogs.map(({ instrument }) => instrument),
  ]);
  for (const key of used) {
    const draft = await investigator.does((em) => startDraft(em, { from: 'library', key }));
    await investigator.does((em) =>
      publishDraft(em, draft.id, draft.revision, { reason: 'As it ships with the library' }),
    );
  }
  const draft = await investigator.does((em) => startProtocolDraft(em, { from: 'blank' }));
  const saved = await investigator.does((em) =>
    saveProtocolDraft(em, draft.revision, { text: JSON.stringify(protocol, null, 2) }),
  );
  await investigator.does((em) => publishProtocol(em, saved.revision, { reason: 'First version' }));
  const study = await investigator.does((em) => em.findOneOrFail(StudySchema, id));
  await investigator.does((em) => startEnrolment(em, study.revision, { reason: 'Approvals are on file' }));
}
