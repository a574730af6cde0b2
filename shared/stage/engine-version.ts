/** Stored with each sizing and each approval; rises whenever a figure may come out otherwise. */
export const ENGINE_VERSION = '1.0.0'
