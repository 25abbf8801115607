/** Names the file into which a program writes what it took. */
export const USAGE_FILE_VARIABLE = 'RECALESCE_BENCH_USAGE_FILE';
