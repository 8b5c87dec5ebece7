import type { CookieOptions } from 'express';
import type { Config } from '../../config/config.js';

/** What the cookie carries: who, which session and which generation of it; nothing that could go out of date. */
export interface Claims {
  readonly sub: string;
  readonly sid: string;
  readonly gen: number;
}

export const ALGORITHM = 'HS256';
export const ISSUER = 'foreveil';
export const AUDIENCE = 'foreveil-web';

/** Browsers refuse a __Host- cookie that is not secure, so the name says whether the site is. */
export const cookieName = (config: Config) => (config.secureCookies ? '__Host-foreveil' : 'foreveil');

export const cookieOptions = (config: Config): CookieOptions => ({
  httpOnly: true,
  sameSite: 'lax',
  secure: config.secureCookies,
  path: '/',
});
