import fc from 'fast-check';

// The same samples in every run, so that a failure is met again; COUNTERLAG_SEED tries others.
fc.configureGlobal({ seed: Number(process.env.COUNTERLAG_SEED ?? 20_261_201) });
