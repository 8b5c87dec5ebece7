import { ConfigError, loadConfig, type Config } from './config.js';

/** For programs: says what is wrong with the environment, in plain lines, and ends. */
export function configOrExit(): Config {
  try {
    return loadConfig();
  } catch (error) {
    if (!(error instanceof ConfigError)) throw error;
    process.stderr.write(`${error.message}\n`);
    process.exit(1);
  }
}
