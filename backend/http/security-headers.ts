import helmet from 'helmet';
import type { RequestHandler } from 'express';

/** The style sheets that libraries insert, by hash: an upgrade that changes one is seen by the browser test. */
const libraryStyles = [
  "'sha256-47DEQpj8HBSa+/TImW+5JCeuQeRkm5NMpJWZG3hSuFU='",
  "'sha256-2GF9hCGTDj/GGFNlQA54jDdMGl2fvoeZmZjAvBSiAtM='",
  "'sha256-38RhXrc7EdReTKsOm23ZPOCUgniTUUcjky8QOOrQx6o='",
];

/** Headers of every response, errors and downloads included (WS-06). */
export function securityHeaders(publicUrl: string): RequestHandler {
  const tls = new URL(publicUrl).protocol === 'https:';
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        scriptSrc: ["'self'"],
        styleSrc: ["'self'", ...libraryStyles],
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'"],
        connectSrc: ["'self'"],
        workerSrc: ["'self'"],
        objectSrc: ["'none'"],
        baseUri: ["'none'"],
        frameAncestors: ["'none'"],
        formAction: ["'self'"],
        ...(tls ? { upgradeInsecureRequests: [] } : {}),
      },
    },
    strictTransportSecurity: tls ? { maxAge: 31_536_000, includeSubDomains: true } : false,
    referrerPolicy: { policy: 'no-referrer' },
    crossOriginEmbedderPolicy: false,
  });
}
