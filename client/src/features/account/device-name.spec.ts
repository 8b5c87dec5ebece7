import { expect, it } from 'vitest';
import { deviceName } from './device-name.js';

// the forms in which these browsers name themselves, from memory
it.each([
  ['Mozilla/5.0 (X11; Linux x86_64; rv:140.0) Gecko/20100101 Firefox/140.0', 'Firefox on Linux'],
  [
    'Mozilla/5.0 (Windows NT 10.0; Win64; x64) AppleWebKit/537.36 (KHTML, like Gecko) Chrome/140.0 Safari/537.36 Edg/140.0',
    'Edge on Windows',
  ],
  ['Mozilla/5.0 (iPhone; CPU iPhone OS 18_0 like Mac OS X) AppleWebKit/605.1.15 Version/18.0 Safari/604.1', 'Safari on iOS'],
  ['Mozilla/5.0 (Linux; Android 15) AppleWebKit/537.36 (KHTML, like Gecko) Chrome/140.0 Mobile Safari/537.36', 'Chrome on Android'],
  ['our nightly script', 'our nightly script'],
  ['', 'Unknown device'],
])('says of %j: %s', (agent, name) => expect(deviceName(agent)).toBe(name));
