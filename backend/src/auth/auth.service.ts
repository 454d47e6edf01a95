import type { IncomingHttpHeaders } from "node:http";
import { Inject, Injectable } from "@nestjs/common";
import { fromNodeHeaders } from "better-auth/node";
import type { Actor } from "../common/actor.js";
import { MembersRepository } from "../workspaces/members.repository.js";
import { BETTER_AUTH, type BetterAuth } from "./better-auth.js";

/** Tells who sends a request or opens a socket. */
@Injectable()
export class AuthService {
  constructor(
    @Inject(BETTER_AUTH) private readonly betterAuth: BetterAuth,
    private readonly members: MembersRepository,
  ) {}

  /**
   * The signed-in member behind these headers (the cookie counts); null without a session or a membership.
   * @param look only looks: does not count as a use that makes the session last longer
   */
  async actorOf(
    headers: IncomingHttpHeaders,
    look: { only: boolean } = { only: false },
  ): Promise<Actor | null> {
    if (headers.cookie === undefined) return null;
    const found = await this.betterAuth.api.getSession({
      headers: fromNodeHeaders(headers),
      query: { disableRefresh: look.only },
    });
    if (found === null) return null;
    const membership = await this.members.firstOf(found.user.id);
    if (membership === null) return null;
    const { id, name, email } = found.user;
    return { person: { id, name, email }, ...membership };
  }

  /**
   * Opens a session for a person.
   * @returns the values of the set-cookie headers to send
   */
  async openSession(personId: string): Promise<string[]> {
    const { headers } = await this.betterAuth.api.openSession({ body: { personId }, returnHeaders: true });
    return headers.getSetCookie();
  }
}
