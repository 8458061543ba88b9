// Headers that every answer carries: what a page may load, who may frame it (nobody), what it may use.

import type { NextFunction, Request, Response } from 'express';
import helmet from 'helmet';

/** SHA-256 of nothing: react-native-web adds an empty style element and fills it by script, which the policy lets it. */
const emptyStyle = "'sha256-47DEQpj8HBSa+/TImW+5JCeuQeRkm5NMpJWZG3hSuFU='";
const yearSeconds = 31_536_000;

/** Camera by the file field needs no permission of ours; the screen stays awake during a session. */
const permissions =
  'accelerometer=(), camera=(), geolocation=(), gyroscope=(), magnetometer=(), microphone=(), payment=(), usb=(), screen-wake-lock=(self)';

export function securityHeaders(isHttps: boolean) {
  const guard = helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'none'"],
        scriptSrc: ["'self'"],
        styleSrc: ["'self'", emptyStyle],
        imgSrc: ["'self'", 'data:', 'blob:'],
        fontSrc: ["'self'"],
        mediaSrc: ["'self'"],
        connectSrc: ["'self'"],
        manifestSrc: ["'self'"],
        workerSrc: ["'self'"],
        frameAncestors: ["'none'"],
        baseUri: ["'none'"],
        formAction: ["'self'"],
        objectSrc: ["'none'"],
      },
    },
    // Behind plain http the header would be ignored by browsers, and wrong.
    strictTransportSecurity: isHttps ? { maxAge: yearSeconds, includeSubDomains: true } : false,
    referrerPolicy: { policy: 'no-referrer' },
    crossOriginOpenerPolicy: { policy: 'same-origin' },
    crossOriginResourcePolicy: { policy: 'same-origin' },
    xFrameOptions: { action: 'deny' },
  });
  return (request: Request, response: Response, next: NextFunction): void => {
    response.setHeader('Permissions-Policy', permissions);
    guard(request, response, next);
  };
}
