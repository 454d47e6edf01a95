import { createBrowserRouter } from "react-router-dom";
import { CrashPage } from "./crash-page";
import { AppFrame } from "./frame/app-frame";
import { NotFoundPage } from "./not-found-page";
import { PageWait } from "./page-wait";
import { SessionGate } from "./session-gate";

/** Every page is a chunk of its own, so that the first one comes quickly. */
export const router = createBrowserRouter([
  {
    errorElement: <CrashPage />,
    hydrateFallbackElement: <PageWait />,
    children: [
      { path: "/sign-in", lazy: async () => ({ Component: (await import("./sign-in-page")).SignInPage }) },
      {
        element: <SessionGate />,
        children: [
          {
            element: <AppFrame />,
            errorElement: <CrashPage />,
            children: [
              {
                index: true,
                lazy: async () => ({ Component: (await import("./projects-page")).ProjectsPage }),
              },
              {
                path: "projects/:projectId",
                lazy: async () => ({ Component: (await import("./project-page")).ProjectPage }),
              },
              {
                path: "examples",
                lazy: async () => ({ Component: (await import("./gallery-page")).GalleryPage }),
              },
              { path: "media", lazy: async () => ({ Component: (await import("./media-page")).MediaPage }) },
              {
                path: "scenes/:sceneId",
                lazy: async () => ({ Component: (await import("./scene-page")).ScenePage }),
              },
              { path: "*", element: <NotFoundPage /> },
            ],
          },
        ],
      },
    ],
  },
]);
