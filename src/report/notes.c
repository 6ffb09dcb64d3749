#include "report/notes.h"

#include <stdio.h>
#include <string.h>

#include "base/memory.h"

struct figure notes_mark(struct notes *notes, const char *text)
{
	struct figure mark = {""};
	size_t i = 0;

	if (!text || !text[0] || notes->status != STATUS_OK)
		return mark;
	while (i < notes->count && strcmp(notes->texts[i], text) != 0)
		i++;
	if (i == notes->count) {
		notes->status = memory_resize(&notes->texts, i + 1,
					      sizeof(*notes->texts));
		if (notes->status != STATUS_OK)
			return mark;
		notes->texts[i] = text;
		notes->count++;
	}
	(void)snprintf(mark.text, sizeof(mark.text), "[%zu]", i + 1);
	return mark;
}

enum status notes_finish(struct notes *notes, const struct writer *writer)
{
	enum status status = notes->status;

	for (size_t i = 0; status == STATUS_OK && i < notes->count; i++)
		write_paragraph(writer, "[%zu] %s", i + 1, notes->texts[i]);
	memory_free(notes->texts);
	*notes = (struct notes){0};
	return status;
}
