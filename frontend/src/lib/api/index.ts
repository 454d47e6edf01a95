export { request } from "./client";
export { ApiError, sentenceOf } from "./errors";
export { onSignedOut } from "./signed-out";
