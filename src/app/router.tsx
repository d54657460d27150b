/** The shell around the pages: open ones before sign-in, all others behind the session gate. */
import { createBrowserRouter } from 'react-router-dom';
import { ErrorPage } from './ErrorPage.tsx';
import { Layout } from './Layout.tsx';
import { NotFoundPage } from './NotFoundPage.tsx';
import { openRoutes, pageRoutes } from './routes.tsx';
import { SessionGate } from './SessionGate.tsx';

export const router = createBrowserRouter([
  {
    element: <Layout />,
    errorElement: <ErrorPage />,
    hydrateFallbackElement: <></>,
    children: [
      { errorElement: <ErrorPage />, children: [...openRoutes, { element: <SessionGate />, children: [...pageRoutes, { path: '*', element: <NotFoundPage /> }] }] },
    ],
  },
]);
