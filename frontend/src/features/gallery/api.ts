import { ExampleDto } from "@heddle/backend/contract";
import { useQuery } from "@tanstack/react-query";
import { z } from "zod";
import { request } from "../../lib/api";

/** The scenes that come with the product. */
export const useExamples = () =>
  useQuery({
    queryKey: ["examples"],
    queryFn: ({ signal }) => request("GET", "/api/examples", { answer: z.array(ExampleDto), signal }),
    staleTime: Number.POSITIVE_INFINITY,
  });
