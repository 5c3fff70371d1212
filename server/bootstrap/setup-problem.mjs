/** Something that the person who typed the command can put right; its message is one clear sentence and needs no stack trace. */
export class SetupProblem extends Error {}
