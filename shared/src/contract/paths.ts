/** Addresses of the API, written once: the server's controllers are tested against them, the client calls them. */
export const apiPaths = {
  signIn: '/api/auth/sign-in',
  signOut: '/api/auth/sign-out',
  me: '/api/auth/me',
  programmes: '/api/programmes',
  programme: (p: string) => `/api/programmes/${p}`,
  events: (p: string) => `/api/programmes/${p}/events`,
  targets: (p: string) => `/api/programmes/${p}/targets`,
  target: (p: string, t: string) => `/api/programmes/${p}/targets/${t}`,
  targetReport: (p: string, t: string) => `/api/programmes/${p}/targets/${t}/report.csv`,
  spectra: (p: string) => `/api/programmes/${p}/spectra`,
  spectrum: (p: string, s: string) => `/api/programmes/${p}/spectra/${s}`,
  /** binary, see contract/samples.ts */
  samples: (p: string, s: string) => `/api/programmes/${p}/spectra/${s}/samples`,
  original: (p: string, s: string) => `/api/programmes/${p}/spectra/${s}/original`,
  spectrumReport: (p: string, s: string) => `/api/programmes/${p}/spectra/${s}/report.csv`,
  analyses: (p: string, s: string) => `/api/programmes/${p}/spectra/${s}/analyses`,
  analysis: (p: string, a: string) => `/api/programmes/${p}/analyses/${a}`,
  cancelAnalysis: (p: string, a: string) => `/api/programmes/${p}/analyses/${a}/cancel`,
  identifications: (p: string, s: string) => `/api/programmes/${p}/spectra/${s}/identifications`,
  decide: (p: string, a: string, featureIndex: number) => `/api/programmes/${p}/analyses/${a}/features/${featureIndex}/decision`,
  comparisons: (p: string) => `/api/programmes/${p}/comparisons`,
  comparison: (p: string, c: string) => `/api/programmes/${p}/comparisons/${c}`,
  comparisonRerun: (p: string, c: string) => `/api/programmes/${p}/comparisons/${c}/rerun`,
  comparisonReport: (p: string, c: string) => `/api/programmes/${p}/comparisons/${c}/report.csv`,
  /** the line's key goes percent-encoded */
  comparisonRuling: (p: string, c: string, lineKey: string) =>
    `/api/programmes/${p}/comparisons/${c}/lines/${encodeURIComponent(lineKey)}/ruling`,
  lineLists: '/api/line-lists',
  live: '/api/health/live',
  ready: '/api/health/ready',
} as const;
