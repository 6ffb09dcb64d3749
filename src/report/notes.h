/* Numbered notes under tables: reasons that would make columns too wide. */
#ifndef REPORT_NOTES_H
#define REPORT_NOTES_H

#include "report/figures.h"
#include "report/writer.h"

struct notes {
	const char **texts; /* owned; the texts are borrowed */
	size_t count;
	enum status status; /* no memory sticks */
};

/* "[3]" for the text, the same for equal ones; "" for an empty text. */
struct figure notes_mark(struct notes *notes, const char *text);
/* Writes and releases. STATUS_NO_MEMORY. */
MUST_USE enum status notes_finish(struct notes *notes,
				  const struct writer *writer);

#endif
