/** The browser tests run the application as it is delivered: dist/ is made to fit the sources first. */
import { ensureBuilt } from '../../server/setup/build.js';

export default async function setup() {
  await ensureBuilt();
}
