import type { Request, Response } from 'express';
import { SignJWT, jwtVerify } from 'jose';

const cookieName = 'tallyweir_session';
const audience = 'tallyweir';
const daysIdleMax = 30;

export interface SessionClaims {
  sessionId: string;
  personId: string;
  organisationId: string;
}

/** Sets the session cookie: HttpOnly, same-site, carrying a signed token that names a session on the server. */
export async function setSessionCookie(
  response: Response,
  claims: SessionClaims,
  secret: Uint8Array,
  isSecure: boolean,
): Promise<void> {
  const token = await new SignJWT({ person: claims.personId, organisation: claims.organisationId })
    .setProtectedHeader({ alg: 'HS256' })
    .setSubject(claims.sessionId)
    .setAudience(audience)
    .setIssuedAt()
    .setExpirationTime('400d')
    .sign(secret);
  response.cookie(cookieName, token, {
    httpOnly: true,
    sameSite: 'strict',
    secure: isSecure,
    path: '/',
    maxAge: daysIdleMax * 86_400_000,
  });
}

export const clearSessionCookie = (response: Response): void => {
  response.clearCookie(cookieName, { httpOnly: true, sameSite: 'strict', path: '/' });
};

/** The claims of the request's cookie, or null: a wrong or forged token is the same as none. */
export async function readSessionCookie(request: Request, secret: Uint8Array): Promise<SessionClaims | null> {
  const header = request.headers.cookie ?? '';
  const pair = header
    .split(';')
    .map((part) => part.trim())
    .find((part) => part.startsWith(`${cookieName}=`));
  if (!pair) return null;
  try {
    const { payload } = await jwtVerify(decodeURIComponent(pair.slice(cookieName.length + 1)), secret, {
      audience,
      algorithms: ['HS256'],
    });
    if (!payload.sub) return null;
    return {
      sessionId: payload.sub,
      personId: String(payload['person']),
      organisationId: String(payload['organisation']),
    };
  } catch {
    return null;
  }
}

/** A session unused for longer than this has ended. */
export const idleLimitMs = daysIdleMax * 86_400_000;
