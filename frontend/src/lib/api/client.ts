/** The typed client of the server's API: paths, parameters and answers come from its OpenAPI description. */
import createClient from "openapi-fetch";
import type { Middleware } from "openapi-fetch";
import createQueryClient from "openapi-react-query";
import { unreachable } from "./errors";
import { refusalOf } from "./refusals";
import type { paths } from "./schema.gen";

/** Whatever is not an answer is thrown, as an ApiError with its sentence. */
const throwRefusals: Middleware = {
  async onResponse({ response }) {
    if (!response.ok) throw await refusalOf(response);
  },
  onError({ error, request }) {
    if (request.signal.aborted)
      return error instanceof Error ? error : new Error("The request was given up.");
    return unreachable();
  },
};

/** Plain calls: `(await api.GET("/api/examples")).data`. They throw ApiError. */
export const api = createClient<paths>({ credentials: "same-origin" });
api.use(throwRefusals);

/** The same as TanStack Query hooks: `$api.useQuery("get", "/api/examples")`. Their `error` is an ApiError. */
export const $api = createQueryClient(api);
