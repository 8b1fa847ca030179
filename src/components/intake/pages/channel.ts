/** Between the windows of one engagement's pages: a number clicked in the one goes into the form of the other. */
export const pageChannel = (code: string) => new BroadcastChannel(`counterlag-pages:${code}`);
