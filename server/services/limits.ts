/** Bounds on what one request may bring, so that no request can hold the server up. README.md names them. */
export const limits = {
  /** Bodies of ordinary requests. */
  bodyBytes: 100 * 1024,
  /** A batch of edits, or a whole design as a document. */
  editsBodyBytes: 5 * 1024 * 1024,
  engineBodyBytes: 2 * 1024 * 1024,
  /** Objects and arrays inside one another; a design has 8. */
  nestedLevels: 32,
  /** A stored design, as JSON. */
  designBytes: 8 * 1024 * 1024,
  designEntries: 20_000,
  /** A design that is checked without being stored. */
  checkedEntries: 5_000,
  /** Each finding's fixes cost some runs of all checks: fewer entries then, and fixes for the first findings only. */
  checkedEntriesWithFixes: 500,
  findingsWithFixes: 20,
  /** A design whose load or outage is worked out without being stored: each demand and each host is followed on its own. */
  followedEntries: 2_000,
  /** An outage with all pairs of hosts listed: they grow with the square of the hosts. */
  followedEntriesWithPairs: 500,
  /** Other designs whose numbers one design is told of, the last changed first, and how many numbers that may be. */
  neighbours: 300,
  neighbourNumbers: 100_000,
  /** Equipment profiles of a workspace, archived ones among them. */
  profiles: 500,
  /** Personal tokens of one person that work at a time. */
  tokens: 50,
  /** Waivers that were withdrawn, as far back as one list tells of them. */
  withdrawnWaivers: 200,
  /** Sittings of one design, as far back as its history tells of them. */
  sittings: 500,
  /** A comment that suggests a change: it may place whole sites. */
  suggestionBodyBytes: 1024 * 1024,
  /** Comments of one design, replies and resolved ones among them: one answer holds them all. */
  commentsOfDesign: 5_000,
  /** What one CSV file tells of a workspace's activity, the newest first. */
  activityRowsOfCsv: 50_000,
  /** How long a whole workspace may take to be read. */
  exportMs: 10 * 60 * 1000,
  /** Designs whose counts one list brings up to date; the others follow with the next. */
  recountedAtOnce: 20,
  /** Kept mails that one list of the mailbox shows, the newest first. */
  keptMails: 200,
} as const;
