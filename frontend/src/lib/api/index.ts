export { $api, api } from "./client";
export { ApiError, problemsOf, sentenceOf, statusOf } from "./errors";
export { request } from "./request";
export { onSignedOut } from "./signed-out";
