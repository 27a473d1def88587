import {
  addSiteBody,
  changeSiteBody,
  createStudyBody,
  renameStudyBody,
  siteDto,
  studyDto,
  type AddSiteBody,
  type ChangeSiteBody,
  type CreateStudyBody,
  type RenameStudyBody,
} from '#schemas/api/studies.ts';
import { currentStudyId } from '#backend/http/actor.ts';
import type { Deps } from '#backend/http/deps.ts';
import { listOf, pageQuery } from '#backend/http/list.ts';
import { etag, ifMatch } from '#backend/http/preconditions.ts';
import { idParameter, type RouteTable } from '#backend/http/route.ts';
import { listStudies, presentSite, readStudy } from './study.queries.ts';
import { addSite, changeSite, createStudy, renameStudy } from './study.service.ts';

/** Studies and sites: set up by the administrator, read by the members. */
export function declareStudyRoutes({ route }: RouteTable, { orm }: Deps): void {
  route({
    method: 'get',
    path: '/studies/:studyCode',
    summary: 'The study acted in, with its sites',
    gate: ['read', 'Study'],
    responds: { status: 200, body: studyDto },
    acts: null,
    handler: async (_request, response) => {
      const study = await readStudy(orm.em, currentStudyId());
      response.set('ETag', etag(study.revision)).json(study);
    },
  });

  route({
    method: 'get',
    path: '/administration/studies',
    summary: 'Every study by code',
    gate: ['administer', 'Study'],
    query: { type: 'object', additionalProperties: false, properties: pageQuery },
    responds: { status: 200, body: listOf(studyDto) },
    acts: null,
    handler: async (request, response) => {
      response.json(await listStudies(orm.em, request.query));
    },
  });

  route({
    method: 'post',
    path: '/administration/studies',
    summary: 'Make a study',
    gate: ['create', 'Study'],
    body: createStudyBody,
    responds: { status: 201, body: studyDto },
    acts: ['study-created'],
    handler: async (request, response) => {
      const { id } = await createStudy(orm.em, request.body as CreateStudyBody);
      const study = await readStudy(orm.em, id);
      response.status(201).set('ETag', etag(study.revision)).json(study);
    },
  });

  route({
    method: 'get',
    path: '/administration/studies/:studyId',
    summary: 'One study with its sites',
    gate: ['administer', 'Study'],
    responds: { status: 200, body: studyDto },
    acts: null,
    handler: async (request, response) => {
      const study = await readStudy(orm.em, idParameter(request, 'studyId'));
      response.set('ETag', etag(study.revision)).json(study);
    },
  });

  route({
    method: 'put',
    path: '/administration/studies/:studyId',
    summary: 'Change how a study is called; its code stays',
    gate: ['update', 'Study'],
    body: renameStudyBody,
    responds: { status: 200, body: studyDto },
    acts: ['study-changed'],
    handler: async (request, response) => {
      const id = idParameter(request, 'studyId');
      await renameStudy(orm.em, id, ifMatch(request), request.body as RenameStudyBody);
      const study = await readStudy(orm.em, id);
      response.set('ETag', etag(study.revision)).json(study);
    },
  });

  route({
    method: 'post',
    path: '/administration/studies/:studyId/sites',
    summary: 'Add a site',
    gate: ['create', 'Site'],
    body: addSiteBody,
    responds: { status: 201, body: siteDto },
    acts: ['site-added'],
    handler: async (request, response) => {
      const site = await addSite(orm.em, idParameter(request, 'studyId'), request.body as AddSiteBody);
      response.status(201).set('ETag', etag(site.revision)).json(presentSite(site));
    },
  });

  route({
    method: 'put',
    path: '/administration/sites/:siteId',
    summary: "Change a site's name, or before the study begins its time zone",
    gate: ['update', 'Site'],
    body: changeSiteBody,
    responds: { status: 200, body: siteDto },
    acts: ['study-changed'],
    handler: async (request, response) => {
      const id = idParameter(request, 'siteId');
      const site = await changeSite(orm.em, id, ifMatch(request), request.body as ChangeSiteBody);
      response.set('ETag', etag(site.revision)).json(presentSite(site));
    },
  });
}
