/** Files that are no recordings, made from one that is. Each must be refused with a line that names file and reason. */

/** Takes the lines of a recording, gives the text of a spoilt one. */
export const spoiltFiles: Record<string, (lines: string[]) => string> = {
  'an empty file': () => '',
  'a heading without rows': (lines) => `${lines[0]}\n`,
  'an unknown sensor': (lines) => [lines[0].replace(/,A/, ',Q'), ...lines.slice(1)].join('\n'),
  'a missing column': (lines) =>
    lines.map((line, i) => (i > 0 ? line.slice(0, line.lastIndexOf(',')) : line)).join('\n'),
  'text in a number': (lines) => lines.map((line, i) => (i === 40 ? line.replace(/,[^,]*/, ',abc') : line)).join('\n'),
  'a clock that runs backwards': (lines) => [...lines.slice(0, 60), lines[20], ...lines.slice(60)].join('\n'),
}
