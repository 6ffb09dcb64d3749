#include "cost/findings.h"

#include "base/memory.h"

#include <assert.h>
#include <string.h>

enum status findings_init(struct findings *findings, size_t series_count,
			  size_t order_count)
{
	struct findings made = {.series_count = series_count,
				.order_count = order_count};

	TRY(memory_new_zeroed(series_count, sizeof(*made.series),
			      &made.series));
	if (memory_new_zeroed(order_count, sizeof(*made.orders),
			      &made.orders) != STATUS_OK) {
		memory_free(made.series);
		return STATUS_NO_MEMORY;
	}
	*findings = made;
	return STATUS_OK;
}

void findings_release(struct findings *findings)
{
	for (size_t i = 0; i < findings->series_count; i++)
		costs_release(&findings->series[i].costs);
	memory_free(findings->series);
	memory_free(findings->orders);
	*findings = (struct findings){0};
}

void findings_note(struct findings *findings, const char *key, int64_t value)
{
	struct note *note = &findings->notes[findings->note_count];

	assert(findings->note_count < FINDING_NOTES_MAX);
	assert(strlen(key) < sizeof(note->key));
	strcpy(note->key, key);
	note->value = value;
	findings->note_count++;
}

int findings_find(const struct findings *findings, const char *key,
		  int64_t *value)
{
	for (size_t i = 0; i < findings->note_count; i++) {
		if (strcmp(findings->notes[i].key, key) == 0) {
			*value = findings->notes[i].value;
			return 1;
		}
	}
	return 0;
}
