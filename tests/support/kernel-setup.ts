import { ensureKernel } from '../../server/setup/builds.mjs';

/** Tests run from the source: the kernel is compiled where it is missing or older than its source. */
export default async function setUp(): Promise<void> {
  await ensureKernel();
}
