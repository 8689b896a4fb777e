import helmet from "helmet";
import type { RequestHandler } from "express";
import type { Config } from "../config.ts";

/**
 * What a page of ours may load: its own files and nothing else, no inline script, no frame around it. Styles may be
 * inline because the component library writes the theme into a style element and charts place their parts by style
 * attributes; pictures may be data: and blob: because canvases are copied into them, workers blob: for drawing.
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
        styleSrc: ["'self'", "'unsafe-inline'"],
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
