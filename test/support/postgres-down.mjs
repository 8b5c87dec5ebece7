import { closeCluster } from '../../scripts/lib/postgres/cluster.mjs';

/** After them: stops it, unless another run uses it too. */
export default async function down() {
  if (globalThis.openedCluster) await closeCluster(globalThis.openedCluster);
}
