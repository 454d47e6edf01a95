export { $api, api } from "./client";
export { ApiError, problemsOf, sentenceOf, statusOf } from "./errors";
export { request } from "./request";
export type { components } from "./schema.gen";
export { onSignedOut } from "./signed-out";
