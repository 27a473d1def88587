import type { EntityManager } from '@mikro-orm/postgresql';
import type { FigureDto } from '#schemas/api/overview.ts';
import { accessible } from '#backend/database/row-filter.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import { VisitSchema } from '../capture/visit.entity.ts';
import { QuerySchema } from '../monitoring/monitoring.entity.ts';
import { ParticipantSchema } from '../participants/participant.entity.ts';
import { StudySchema } from '../studies/study.entity.ts';

/** The study in a few numbers, of the rows the actor may know of; none for roles that see data in cuts only. */
export async function figuresOf(em: EntityManager): Promise<FigureDto[]> {
  const participants = accessible('read', 'Participant');
  const visits = accessible('read', 'Visit');
  const queries = accessible('read', 'Query');
  if (participants === null || visits === null) return [];
  const study = await em.findOneOrFail(StudySchema, currentStudyId());
  const enrolled = await em.count(ParticipantSchema, participants);
  const today = new Date().toISOString().slice(0, 10);
  const due = await em.count(VisitSchema, { $and: [visits, { plannedOn: { $lte: today } }] });
  const done = await em.count(VisitSchema, { $and: [visits, { state: 'completed' }] });
  const missed = await em.count(VisitSchema, { $and: [visits, { state: 'missed' }] });
  const figures: FigureDto[] = [
    { label: 'Enrolled', value: String(enrolled), note: `planned ${study.plannedParticipants}` },
    { label: 'Visits completed', value: String(done), note: `${due} due until today, ${missed} missed` },
  ];
  if (queries !== null) {
    const open = { $and: [queries, { state: { $ne: 'settled' as const } }] };
    const [oldest] = await em.find(QuerySchema, open, { orderBy: { openedAt: 'asc' }, limit: 1 });
    const days = oldest ? Math.floor((Date.now() - oldest.openedAt.getTime()) / 86_400_000) : 0;
    figures.push({
      label: 'Open queries',
      value: String(await em.count(QuerySchema, open)),
      note: oldest ? `oldest ${days} ${days === 1 ? 'day' : 'days'}` : 'none is waiting',
    });
  }
  return figures;
}
