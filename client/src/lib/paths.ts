/** Addresses of the pages, written once: routes are made of them and links go through them. */
export const pagePaths = {
  signIn: '/sign-in',
  forgotPassword: '/forgot-password',
  account: '/account',
  admin: '/admin',
  mail: '/mail',
  members: (p: string) => `/programmes/${p}/members`,
  programmes: '/',
  search: '/search',
  programme: (p: string) => `/programmes/${p}`,
  upload: (p: string, targetId?: string) => `/programmes/${p}/add${targetId ? `?target=${targetId}` : ''}`,
  lineLists: (p: string) => `/programmes/${p}/line-lists`,
  lineList: (p: string, l: string) => `/programmes/${p}/line-lists/${l}`,
  target: (p: string, t: string) => `/programmes/${p}/targets/${t}`,
  probabilities: '/probabilities',
  spectrum: (p: string, s: string) => `/programmes/${p}/spectra/${s}`,
  /** the file of a spectrum and how it was read */
  file: (p: string, s: string) => `/programmes/${p}/spectra/${s}/file`,
  /** two sightlines set side by side; `a` is chosen already when given */
  comparisons: (p: string, a?: string) => `/programmes/${p}/comparisons${a ? `?a=${a}` : ''}`,
  comparison: (p: string, c: string) => `/programmes/${p}/comparisons/${c}`,
  clouds: (p: string) => `/programmes/${p}/clouds`,
  cloud: (p: string, c: string) => `/programmes/${p}/clouds/${c}`,
  /** reading recipes and removed spectra */
  recipes: (p: string) => `/programmes/${p}/recipes`,
} as const;

/** Where to go after signing in: a page of ours or the start, never an address elsewhere. */
export function safeNext(next: string | null): string {
  return next && /^\/(?![/\\])/.test(next) && !next.startsWith(pagePaths.signIn) ? next : pagePaths.programmes;
}
