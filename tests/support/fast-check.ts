import fc from 'fast-check';

/**
 * Property tests draw the same cases on every run, so that a red run means a change and not luck;
 * `FAST_CHECK_SEED=$RANDOM npm run unit` looks at others.
 */
fc.configureGlobal({ seed: Number(process.env.FAST_CHECK_SEED ?? 20_261_201) });
