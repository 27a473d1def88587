import type { EntryDto } from '#schemas/api/capture.ts';
import { beginVisit, expectStatus, openEntry, publishLibrary } from '../support/capture-builders.ts';
import {
  aProtocol,
  consent,
  enrol,
  publishProtocol,
  setStudyState,
} from '../support/participants-builders.ts';
import type { TestServer } from '../support/server.ts';
import { aMember, aStudy, type Member } from '../support/setup-builders.ts';

export interface StudyWithEntries {
  studyId: string;
  siteId: string;
  path: string;
  coordinator: Member;
  /** Open entries of resting pressures, one a participant. */
  entries: EntryDto[];
}

/** A running study in which this many participants have begun a visit with one open entry. */
export async function aStudyWithEntries(server: TestServer, count: number): Promise<StudyWithEntries> {
  const { study, sites } = await aStudy(server, { siteCodes: ['AA', 'BB'] });
  const path = `/studies/${study.code}`;
  const investigator = await aMember(server, 'principal-investigator', study);
  const coordinator = await aMember(server, 'coordinator', study);
  const technician = await aMember(server, 'unblinded-technician', study);
  await publishLibrary(server, study, investigator.personId, ['resting-pressures', 'consent']);
  const visitType = { key: 'only', label: 'Only', targetDay: 1, windowBefore: 0, windowAfter: 7, period: 1 };
  const runSheet = [
    {
      key: 'pressures',
      label: 'Pressures',
      anchor: { kind: 'visit-start' as const },
      plannedMinute: 0,
      durationMinutes: 5,
      instrument: 'resting-pressures',
      performedBy: 'coordinator' as const,
    },
  ];
  const protocol = aProtocol(['AA', 'BB'], { visitTypes: [{ ...visitType, runSheet, measures: [] }] });
  await publishProtocol(server, study, investigator.personId, protocol);
  const sealed = await technician.client.post(`${path}/allocation`, { blockSizes: [2], slotsPerSite: 4 });
  expectStatus(sealed, 201);
  await setStudyState(server, study, 'running');
  const entries: EntryDto[] = [];
  for (let made = 0; made < count; made += 1) {
    const participant = await enrol({ path, coordinator }, sites[0]!);
    await consent(server, study, participant);
    const sheet = await beginVisit(coordinator.client, path, participant, 'only');
    entries.push(await openEntry(coordinator.client, path, sheet.visit.id, 'pressures'));
  }
  return { studyId: study.id, siteId: sites[0]!.id, path, coordinator, entries };
}
