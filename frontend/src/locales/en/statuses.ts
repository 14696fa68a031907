/** How a figure came to be known. */
export default {
  read: 'read in the source',
  memory: 'from memory of the publication named, not yet compared with its page again',
  practice: 'common practice, no source',
  derived: 'worked out from other values',
  laboratory: 'laboratory report',
  typed: 'typed in here',
  invented: 'made up for the demo',
  short: {
    read: 'read',
    memory: 'from memory',
    practice: 'practice',
    derived: 'derived',
    laboratory: 'lab',
    typed: 'typed',
    invented: 'made up',
  },
} as const
