/** The watch log: read, written by people, with files. Lines of the program come from `watchLog`. */
export { addAttachment, readAttachment } from './log/attachments.ts'
export { changesSince, newestLog, readEntry, readLog } from './log/read.ts'
export type { LogQuestion } from './log/read.ts'
export { writeEntry } from './log/write.ts'
