const MESSAGE_DOMAIN = 'merestone.invalid';

/** Fixed per outbox row: a mail sent twice after a crash is known as the same one. */
export const messageIdOf = (outboxId: string) => `<${outboxId}@${MESSAGE_DOMAIN}>`;
