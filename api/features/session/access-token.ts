import jwt from 'jsonwebtoken';
import { z } from 'zod';

export const ACCESS_SECONDS = 600;
export const TOKEN_ISSUER = 'gustloom';
export const TOKEN_ALGORITHM = 'HS256';

/** What an access token says; nothing in it is believed longer than ten minutes, nor against the membership's row. */
export const AccessClaims = z.object({
  sub: z.uuid(),
  org: z.uuid(),
  sid: z.uuid(),
  ver: z.int(),
});
export type AccessClaims = z.infer<typeof AccessClaims>;

export const signAccessToken = (claims: AccessClaims, secret: string): string =>
  jwt.sign(claims, secret, { algorithm: TOKEN_ALGORITHM, issuer: TOKEN_ISSUER, expiresIn: ACCESS_SECONDS });
