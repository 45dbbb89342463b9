/** The kinds of jobs, here so that a room can ask for work of a room below it without importing it. */
export const JOB = {
  readFiles: 'read-files',
  unpackArchives: 'unpack-archives',
  imageCandidates: 'image-candidates',
  paintStamps: 'paint-stamps',
  readList: 'read-list',
  matchList: 'match-list',
  matchCandidates: 'match-candidates',
  consensus: 'consensus',
  makeRelease: 'make-release',
  sendMail: 'send-mail',
} as const
