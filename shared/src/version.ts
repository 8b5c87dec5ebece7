/** Version of the program, written into every analysis and report. */
export const PROGRAM_VERSION = '0.1.0';
