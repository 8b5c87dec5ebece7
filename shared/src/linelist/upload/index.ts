export * from './diff.js';
export * from './parse-lines.js';
export * from './write-lines.js';
export { MOST_LINES, type ListStatements, type ParsedLines, type RowProblem } from './types.js';
