import helmet from "helmet";
import type { RequestHandler } from "express";
import type { Config } from "../config.ts";

/**
 * What a page of ours may load: its own files and nothing else, no inline script or style, no frame around it. The
 * tokens of the look are plain CSS and drawing goes through canvas and the style object, which need no exception;
 * pictures may be data: and blob: because canvases are copied into them, workers blob: for drawing.
 */
export function securityHeaders(config: Config): RequestHandler {
  const overTls = config.publicUrl.startsWith("https:");
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'"],
        scriptSrcAttr: ["'none'"],
        styleSrc: ["'self'"],
        fontSrc: ["'self'"],
        imgSrc: ["'self'", "data:", "blob:"],
        workerSrc: ["'self'", "blob:"],
        connectSrc: ["'self'"],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        frameAncestors: ["'none'"],
        ...(overTls ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    referrerPolicy: { policy: "same-origin" },
    frameguard: { action: "deny" },
    strictTransportSecurity: overTls,
  });
}
