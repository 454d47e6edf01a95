import type { IncomingHttpHeaders, Server } from "node:http";
import { Inject, Injectable } from "@nestjs/common";
import { HttpAdapterHost } from "@nestjs/core";
import type { NextFunction, Request, Response } from "express";
import { CONFIG, type Config } from "../config/config.js";
import { hostName, isLoopback } from "./loopback.js";
import { Refusal } from "./refusal.js";

const SAFE_METHODS = new Set(["GET", "HEAD", "OPTIONS"]);

/**
 * Which pages may ask this server to do something, for routes and sockets alike. Browsers name the page's origin
 * with every request that changes something and with every socket; a program that is no browser sends none.
 */
@Injectable()
export class OriginPolicy {
  constructor(
    @Inject(CONFIG) private readonly config: Config,
    private readonly adapter: HttpAdapterHost,
  ) {}

  /** True for our own pages and for programs outside a browser. */
  allows(headers: IncomingHttpHeaders): boolean {
    const { origin } = headers;
    if (origin === undefined) {
      const site = headers["sec-fetch-site"];
      return site === undefined || site === "same-origin" || site === "none";
    }
    if (origin === this.config.appUrl) return true;
    if (!URL.canParse(origin)) return false;
    const from = new URL(origin);
    if (from.protocol !== "http:" && from.protocol !== "https:") return false;
    if (isLoopback(this.config.host))
      return isLoopback(from.hostname) && Number(from.port || 80) === this.port();
    // Bound to more than this machine, the server cannot know its names: the page must come from where it asks.
    return from.host === headers.host;
  }

  /** Express middleware that refuses what a foreign page asks for. */
  readonly middleware = (request: Request, response: Response, next: NextFunction): void => {
    if (SAFE_METHODS.has(request.method) || this.allows(request.headers)) {
      next();
      return;
    }
    const refusal = new Refusal(
      "not-allowed",
      "This request came from another web page; open Heddle at its own address, or set APP_URL to that address.",
    );
    response.status(refusal.getStatus()).json(refusal.dto);
  };

  /**
   * True where nobody but a person at this machine can be asking: the server listens on the loopback address,
   * the connection comes from it, no proxy passed it on, and the page's name is the machine's own (a foreign name
   * that resolves here is refused).
   */
  isLocal(request: Request): boolean {
    const { headers, socket } = request;
    const forwarded = ["forwarded", "x-forwarded-for", "x-forwarded-host", "x-real-ip", "via"];
    return (
      isLoopback(this.config.host) &&
      isLoopback(socket.remoteAddress) &&
      forwarded.every((name) => headers[name] === undefined) &&
      isLoopback(hostName(headers.host))
    );
  }

  private port(): number {
    const address = (this.adapter.httpAdapter.getHttpServer() as Server).address();
    if (typeof address === "object" && address !== null) return address.port;
    return this.config.port;
  }
}
