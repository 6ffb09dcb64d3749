/* The tables of a ledger as SQL, and the numbers that mark the file. */
#ifndef LEDGER_SCHEMA_H
#define LEDGER_SCHEMA_H

/* "RFLR" in the file's header says that this is a ledger. */
#define SCHEMA_APPLICATION_ID 0x52464c52
/* Counts up with every change that an older program could not read. */
#define SCHEMA_NUMBER 3

/*
 * Facts lie in survey, library, corpus, method, series, gram, note and cell;
 * what differs between two runs of the same survey lies in run and timing.
 * Counts are 64-bit patterns (a seed above 2^63 shows as negative). Block
 * columns hold 8 bytes a block, two's complement, least significant first.
 */
extern const char *const schema_sql[]; /* a statement each; NULL ends */

#endif
