/**
 * SQL of a sub-query: how many features still wait for a decision, over the current analyses of the spectra `s` that meet `where`.
 * @param where SQL over the alias s, written by us, never by a request
 */
export const openFeatures = (where: string): string => `(
  select coalesce(sum(a.feature_count - (
    select count(*) from identifications i
    where i.spectrum_id = s.id and i.feature_index is not null and i.state in ('accepted', 'rejected'))), 0)::int
  from spectra s join analyses a on a.id = s.current_analysis_id where s.removed_at is null and ${where})`;
