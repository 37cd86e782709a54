import { config } from 'zod/v4/core';

// zod compiles its parsers with `new Function` and asks first whether it may. The policy of this
// site refuses that, and every refusal would stand in the browser's console as an attack.
config({ jitless: true });
