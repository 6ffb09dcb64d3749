/* The phrases of the Marrow Bay duty log. */
#ifndef SOURCE_DUTYLOG_H
#define SOURCE_DUTYLOG_H

#include "source/grammar.h"

/*
 * The last phrase is a line of the log. No text has two derivations: choices
 * of one phrase begin with different words or signs, so that reading from the
 * left settles every choice.
 */
extern const struct phrase dutylog_phrases[];
extern const uint32_t dutylog_phrase_count;

#endif
