import { $api } from "../../lib/api";

/** The scenes that come with the product. */
export const useExamples = () =>
  $api.useQuery("get", "/api/examples", undefined, { staleTime: Number.POSITIVE_INFINITY });
