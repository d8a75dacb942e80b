import { createBrowserRouter, Navigate } from 'react-router-dom';
import { BlankPage } from './components/layout/blank-page.tsx';
import { Shell } from './components/layout/shell.tsx';
import { ErrorPage, ErrorPanel } from './pages/error/error-page.tsx';
import { NotFoundPage } from './pages/not-found/not-found-page.tsx';

/** The screens, each loaded when first asked for. */
export const router = createBrowserRouter([
  {
    path: '/sign-in',
    HydrateFallback: BlankPage,
    ErrorBoundary: ErrorPage,
    lazy: async () => ({ Component: (await import('./pages/sign-in/sign-in-page.tsx')).SignInPage }),
  },
  {
    Component: Shell,
    HydrateFallback: BlankPage,
    ErrorBoundary: ErrorPage,
    children: [
      { index: true, element: <Navigate to="/captures" replace /> },
      {
        ErrorBoundary: ErrorPanel,
        children: [
          {
            path: '/captures',
            lazy: async () => ({
              Component: (await import('./pages/captures/captures-page.tsx')).CapturesPage,
            }),
          },
          {
            path: '/captures/:captureId',
            lazy: async () => ({ Component: (await import('./pages/capture/capture-page.tsx')).CapturePage }),
          },
          {
            path: '/method',
            lazy: async () => ({ Component: (await import('./pages/method/method-page.tsx')).MethodPage }),
          },
          { path: '*', Component: NotFoundPage },
        ],
      },
    ],
  },
]);

/** The screen that is most likely next comes over while nobody waits. */
setTimeout(() => void import('./pages/capture/capture-page.tsx').catch(() => undefined), 3_000);
