/**
 * For `<details {...openWhen(refused)}>`: `open={false}` would be written once more when the page's
 * script starts, and fold again what somebody unfolded before; nothing at all leaves it as it is.
 */
export const openWhen = (open: unknown): { open?: true } => (open ? { open: true } : {});
