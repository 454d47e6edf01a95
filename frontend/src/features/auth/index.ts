export { useSessionQuery, useSignOut, useWelcome } from "./api";
export { DemoSignIn } from "./demo-sign-in";
export { FirstOwnerForm } from "./first-owner-form";
export { SignInForm } from "./sign-in-form";
