/* A made-up survey of Marrow Bay in which every field holds something. */
#ifndef SUPPORT_SAMPLE_SURVEY_H
#define SUPPORT_SAMPLE_SURVEY_H

#include "ledger/ledger.h"

#define SAMPLE_PLAN "7c41d0"

/* Released with survey_release. Fails the running test on no memory. */
void sample_survey(struct survey *survey);
/* A text of the heap, for the owned fields of a survey. */
char *sample_text(const char *text);
/* count block numbers of the heap, all different, a few beyond 32 bits. */
void sample_blocks(void *words, size_t count, int64_t first);

/* Begins and writes it whole; returns its id. finish: also marks it done. */
int64_t sample_write(struct ledger *ledger, struct survey *survey, bool finish);
/* Fails the running test at the first field that differs; ids are not facts. */
void sample_assert_equal(const struct survey *got, const struct survey *wanted);

#endif
