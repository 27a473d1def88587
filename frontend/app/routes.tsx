import type { ComponentType } from 'react';
import type { LoaderFunction, RouteObject } from 'react-router-dom';

interface LoadedPage {
  Component: ComponentType;
  loader?: LoaderFunction;
}

/**
 * A page: its address and where its module is. The module is fetched when the page is first opened.
 * Give a loader beside the component to start the page's queries at once.
 */
const page = (path: string, load: () => Promise<LoadedPage>): RouteObject => ({ path, lazy: load });

/** The pages of a study, below `/studies/:studyCode/`: one line a page, each a file in `frontend/pages`. */
export const studyPages: RouteObject[] = [
  page('study', async () => ({ Component: (await import('#frontend/pages/study-page.tsx')).StudyPage })),
  page('protocol', async () => ({
    Component: (await import('#frontend/pages/protocol-page.tsx')).ProtocolPage,
  })),
  page('protocol/draft', async () => ({
    Component: (await import('#frontend/pages/protocol-draft-page.tsx')).ProtocolDraftPage,
  })),
  page('instruments', async () => ({
    Component: (await import('#frontend/pages/instruments-page.tsx')).InstrumentsPage,
  })),
  page('instruments/:instrumentKey', async () => ({
    Component: (await import('#frontend/pages/instrument-page.tsx')).InstrumentPage,
  })),
  page('instruments/:instrumentKey/draft', async () => ({
    Component: (await import('#frontend/pages/drafting-table-page.tsx')).DraftingTablePage,
  })),
  page('now', async () => ({ Component: (await import('#frontend/pages/now-page.tsx')).NowPage })),
  page('ribbon', async () => ({
    Component: (await import('#frontend/pages/ribbon-page.tsx')).RibbonPage,
  })),
  page('visits', async () => ({ Component: (await import('#frontend/pages/visits-page.tsx')).VisitsPage })),
  page('cuts', async () => ({ Component: (await import('#frontend/pages/cuts-page.tsx')).CutsPage })),
  page('runs', async () => ({ Component: (await import('#frontend/pages/runs-page.tsx')).RunsPage })),
  page('runs/:runId', async () => ({ Component: (await import('#frontend/pages/run-page.tsx')).RunPage })),
  page('visits/:visitId', async () => ({
    Component: (await import('#frontend/pages/visit-page.tsx')).VisitPage,
  })),
  page('participants', async () => ({
    Component: (await import('#frontend/pages/participants-page.tsx')).ParticipantsPage,
  })),
  page('participants/enrolment', async () => ({
    Component: (await import('#frontend/pages/participant-enrolment-page.tsx')).ParticipantEnrolmentPage,
  })),
  page('participants/:code', async () => ({
    Component: (await import('#frontend/pages/participant-page.tsx')).ParticipantPage,
  })),
  page('allocation', async () => ({
    Component: (await import('#frontend/pages/allocation-page.tsx')).AllocationPage,
  })),
  page('verification', async () => ({
    Component: (await import('#frontend/pages/verification-page.tsx')).VerificationPage,
  })),
  page('verification/:visitId', async () => ({
    Component: (await import('#frontend/pages/verification-visit-page.tsx')).VerificationVisitPage,
  })),
  page('queries', async () => ({
    Component: (await import('#frontend/pages/queries-page.tsx')).QueriesPage,
  })),
  page('queries/:queryId', async () => ({
    Component: (await import('#frontend/pages/query-page.tsx')).QueryPage,
  })),
  page('plans', async () => ({ Component: (await import('#frontend/pages/plans-page.tsx')).PlansPage })),
  page('plans/:planId', async () => ({
    Component: (await import('#frontend/pages/plan-page.tsx')).PlanPage,
  })),
  page('plans/signed/:versionId', async () => ({
    Component: (await import('#frontend/pages/plan-page.tsx')).SignedPlanPage,
  })),
  page('exports', async () => ({
    Component: (await import('#frontend/pages/exports-page.tsx')).ExportsPage,
  })),
  page('exports/:exportId', async () => ({
    Component: (await import('#frontend/pages/export-page.tsx')).ExportPage,
  })),
  page('records', async () => ({
    Component: (await import('#frontend/pages/records-page.tsx')).RecordsPage,
  })),
  page('audit', async () => ({ Component: (await import('#frontend/pages/audit-page.tsx')).AuditPage })),
  page('unblinding', async () => ({
    Component: (await import('#frontend/pages/unblinding-page.tsx')).UnblindingPage,
  })),
];

/** The administrator's pages, below `/administration/`. */
export const administrationPages: RouteObject[] = [
  page('audit', async () => ({
    Component: (await import('#frontend/pages/system-audit-page.tsx')).SystemAuditPage,
  })),
  page('people', async () => ({ Component: (await import('#frontend/pages/people-page.tsx')).PeoplePage })),
  page('people/:personId', async () => ({
    Component: (await import('#frontend/pages/person-page.tsx')).PersonPage,
  })),
  page('studies', async () => ({
    Component: (await import('#frontend/pages/administration-studies-page.tsx')).AdministrationStudiesPage,
  })),
  page('studies/:studyId', async () => ({
    Component: (await import('#frontend/pages/administration-study-page.tsx')).AdministrationStudyPage,
  })),
];

/** Pages of a person, in no study: below `/`. */
export const personPages: RouteObject[] = [
  page('choose', async () => ({ Component: (await import('./choose-page.tsx')).ChoosePage })),
  page('account', async () => ({ Component: (await import('./account-page.tsx')).AccountPage })),
  page('help', async () => ({ Component: (await import('./help-page.tsx')).HelpPage })),
];

/** Pages for people who are not signed in. */
export const openPages: RouteObject[] = [
  page('sign-in', async () => ({ Component: (await import('./sign-in-page.tsx')).SignInPage })),
  page('invitation', async () => ({ Component: (await import('./invitation-page.tsx')).InvitationPage })),
  page('new-password', async () => ({
    Component: (await import('./new-password-page.tsx')).NewPasswordPage,
  })),
  page('forgotten-password', async () => ({
    Component: (await import('./forgotten-password-page.tsx')).ForgottenPasswordPage,
  })),
];
