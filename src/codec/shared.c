#include "codec/codec_rows.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

enum status level_number(const char *text, int low, int high, const char *what,
			 struct codec_setting *setting, struct reason *why)
{
	char *end;
	long level = strtol(text, &end, 10);

	if (end == text || *end || level < low || level > high)
		return reason_give(why, STATUS_BAD_USAGE,
				   "level '%s' of %s: whole numbers from %d to "
				   "%d are levels",
				   text, what, low, high);
	setting->level = (int)level;
	(void)snprintf(setting->text, sizeof(setting->text), "%ld", level);
	return STATUS_OK;
}

enum status option_number(const char *word, const char *name, int low, int high,
			  unsigned *value, struct reason *why)
{
	struct codec_setting number;

	if (level_number(word + strlen(name), low, high, name, &number, NULL) !=
	    STATUS_OK)
		return reason_give(why, STATUS_BAD_USAGE,
				   "option '%s': %s%d to %s%d are options",
				   word, name, low, name, high);
	*value = (unsigned)number.level;
	return STATUS_OK;
}

/* Room before each block for its size; keeps the alignment of the heap. */
#define SIZE_ROOM 16

/* A library's own threads allocate, too. */
static void note_peak(struct codec_memory *memory, uint64_t now)
{
	uint64_t peak = __atomic_load_n(&memory->peak_bytes, __ATOMIC_RELAXED);

	while (now > peak && !__atomic_compare_exchange_n(
				     &memory->peak_bytes, &peak, now, true,
				     __ATOMIC_RELAXED, __ATOMIC_RELAXED))
		;
}

void *counted_new(struct codec_memory *memory, size_t bytes)
{
	uint8_t *block;

	if (bytes > SIZE_MAX - SIZE_ROOM ||
	    memory_new(bytes + SIZE_ROOM, 1, &block) != STATUS_OK)
		return NULL;
	memcpy(block, &bytes, sizeof(bytes));
	note_peak(memory, __atomic_add_fetch(&memory->current_bytes, bytes,
					     __ATOMIC_RELAXED));
	return block + SIZE_ROOM;
}

void counted_free(struct codec_memory *memory, void *block)
{
	uint8_t *start;
	size_t bytes;

	if (!block)
		return;
	start = (uint8_t *)block - SIZE_ROOM;
	memcpy(&bytes, start, sizeof(bytes));
	(void)__atomic_sub_fetch(&memory->current_bytes, bytes,
				 __ATOMIC_RELAXED);
	memory_free(start);
}

size_t job_pieces(const struct codec_job *job)
{
	return job->cuts ? job->cut_count : 1;
}

size_t job_piece_end(const struct codec_job *job, size_t i)
{
	return job->cuts ? job->cuts[i] : job->input.length;
}

enum status output_full(const struct buffer *out, const char *library,
			struct reason *why)
{
	if (out->length == out->limit)
		return reason_give(why, STATUS_CODEC,
				   "%s: more bytes come out than went in",
				   library);
	return reason_give(why, STATUS_NO_MEMORY, "out of memory");
}
