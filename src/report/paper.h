/* The parts of the report that plain text and Markdown share. */
#ifndef REPORT_PAPER_H
#define REPORT_PAPER_H

#include "gap/analysis.h"
#include "report/notes.h"
#include "report/writer.h"

/* Each may return STATUS_NO_MEMORY. */

/* Title, program, libraries, and whether it is finished. */
void paper_survey_words(const struct writer *writer,
			const struct survey *survey);
/* One line a corpus. */
MUST_USE enum status paper_overview(const struct writer *writer,
				    const struct analysis *analysis);
/* What the corpus is, its floor and its bracket, in sentences. */
void paper_corpus_words(const struct writer *writer,
			const struct corpus_view *view);
MUST_USE enum status paper_estimates(const struct writer *writer,
				     const struct corpus_view *view,
				     struct notes *notes);
MUST_USE enum status paper_orders(const struct writer *writer,
				  const struct corpus_view *view);
/* Distance to the floor, its parts, then sizes, speed and memory. */
MUST_USE enum status paper_cells(const struct writer *writer,
				 const struct corpus_view *view,
				 struct notes *notes);

/* Where the gap comes from: its terms, their intervals and their levers. */
MUST_USE enum status paper_stack(const struct writer *writer,
				 const struct corpus_view *view,
				 struct notes *notes);
/* What trained dictionaries won, where the survey has any. */
MUST_USE enum status paper_dictionaries(const struct writer *writer,
					const struct corpus_view *view,
					struct notes *notes);

/* The columns codec and layout, and those of an interval. */
#define CELL_COLUMN (2 * CELL_NAME_BYTES)
void paper_cell_key(struct grid *grid, const struct cell_row *row);
void paper_interval(struct grid *grid, struct notes *notes, bool known,
		    const struct interval *interval);

/* Stands before times whose rounds differ too much to be compared. */
#define NOISY_MARK "~"

/* "zstd 19"; cut to the room where a file gave an endless name. */
struct cell_name {
	char text[2 * CELL_NAME_BYTES];
};
struct cell_name cell_name(const struct cell_fact *cell);

/* Not done, or decoded to something else. */
bool cell_failed(const struct cell_fact *cell);

#endif
