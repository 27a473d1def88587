import { createBrowserRouter, type RouteObject } from 'react-router-dom';
import { Skeleton } from '../components/states.tsx';
import { AdministrationIndex, AdministrationLayout } from './administration-layout.tsx';
import { ErrorPage, LastErrorPage, NotFoundPage } from './error-page.tsx';
import { Frame } from './frame.tsx';
import { HomePage } from './home-page.tsx';
import { administrationPages, openPages, personPages, studyPages } from './routes.tsx';
import { StudyLayout } from './study-layout.tsx';

/** Layouts around the table of pages. Each layout has its own error page, so that a failed part leaves the frame. */
export const routeTree: RouteObject[] = [
  {
    ErrorBoundary: LastErrorPage,
    HydrateFallback: Skeleton,
    children: [
      ...openPages,
      {
        Component: Frame,
        children: [
          {
            ErrorBoundary: ErrorPage,
            children: [
              { index: true, Component: HomePage },
              ...personPages,
              {
                path: 'studies/:studyCode',
                Component: StudyLayout,
                children: [
                  {
                    ErrorBoundary: ErrorPage,
                    children: [...studyPages, { path: '*', Component: NotFoundPage }],
                  },
                ],
              },
              {
                path: 'administration',
                Component: AdministrationLayout,
                children: [
                  {
                    ErrorBoundary: ErrorPage,
                    children: [
                      { index: true, Component: AdministrationIndex },
                      ...administrationPages,
                      { path: '*', Component: NotFoundPage },
                    ],
                  },
                ],
              },
              { path: '*', Component: NotFoundPage },
            ],
          },
        ],
      },
    ],
  },
];

export const createRouter = () => createBrowserRouter(routeTree);
