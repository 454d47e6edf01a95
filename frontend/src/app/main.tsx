import { StrictMode } from "react";
import { createRoot } from "react-dom/client";
import { RouterProvider } from "react-router-dom";
import "../lib/fonts.css";
import "../lib/tokens.css";
import { Providers } from "./providers";
import { router } from "./router";

const root = document.getElementById("root");
if (root === null) throw new Error("index.html has no #root.");
createRoot(root).render(
  <StrictMode>
    <Providers>
      <RouterProvider router={router} />
    </Providers>
  </StrictMode>,
);
