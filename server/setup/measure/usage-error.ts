/** A command line that cannot be followed; the message is a sentence for whoever typed it. */
export class UsageError extends Error {}
