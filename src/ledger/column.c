#include "ledger/statement.h"

#include <string.h>

#include "base/memory.h"

void query_damaged(struct query *query, const char *words)
{
	if (query->status != STATUS_OK)
		return;
	query->status = reason_give(
		query->why, STATUS_LEDGER,
		"%s: damaged: %s, column %s: %s; restore a copy, or survey "
		"into a new file",
		query->ledger->path, query->what,
		sqlite3_column_name(query->statement, query->next - 1), words);
}

int64_t query_int(struct query *query)
{
	if (query->status != STATUS_OK)
		return 0;
	return sqlite3_column_int64(query->statement, query->next++);
}

uint64_t query_count(struct query *query)
{
	return (uint64_t)query_int(query);
}

size_t query_small(struct query *query, size_t limit)
{
	uint64_t value = query_count(query);

	if (value <= limit)
		return (size_t)value;
	query_damaged(query, "out of range");
	return 0;
}

double query_real(struct query *query)
{
	double value = 0;

	if (query->status == STATUS_OK)
		value = sqlite3_column_double(query->statement, query->next++);
	/* SQLite holds infinities; no fact of ours is one. */
	if (value - value != 0) {
		query_damaged(query, "not a finite number");
		return 0;
	}
	return value;
}

bool query_is_null(struct query *query)
{
	return query->status == STATUS_OK &&
	       sqlite3_column_type(query->statement, query->next) ==
		       SQLITE_NULL;
}

/* The column's text and its length; NULL when the query has failed. */
static const char *column_text(struct query *query, size_t *length)
{
	const char *text;

	if (query->status != STATUS_OK)
		return NULL;
	text = (const char *)sqlite3_column_text(query->statement, query->next);
	*length = (size_t)sqlite3_column_bytes(query->statement, query->next);
	query->next++;
	if (!text || strlen(text) != *length) {
		query_damaged(query, "not a text");
		return NULL;
	}
	return text;
}

void query_text(struct query *query, char *text, size_t room)
{
	size_t length = 0;
	const char *found = column_text(query, &length);

	if (!found)
		return;
	if (length >= room) {
		query_damaged(query, "too long");
		return;
	}
	memcpy(text, found, length + 1);
}

void query_text_new(struct query *query, char **text)
{
	size_t length = 0;
	const char *found = column_text(query, &length);
	char *copy = NULL;

	if (!found)
		return;
	query->status = ledger_memory(
		query->ledger, memory_new(length + 1, 1, &copy), query->why);
	if (query->status != STATUS_OK)
		return;
	memcpy(copy, found, length + 1);
	*text = copy;
}

static uint64_t word_at(const uint8_t *bytes)
{
	uint64_t word = 0;

	for (unsigned b = 8; b > 0; b--)
		word = word << 8 | bytes[b - 1];
	return word;
}

void query_blocks(struct query *query, size_t wanted, void *words,
		  size_t *count)
{
	const uint8_t *bytes;
	uint64_t *made = NULL;
	size_t length;

	if (query->status != STATUS_OK)
		return;
	bytes = sqlite3_column_blob(query->statement, query->next);
	length = (size_t)sqlite3_column_bytes(query->statement, query->next);
	query->next++;
	if (length % 8 || length / 8 > CUTS_BLOCKS_MAX ||
	    (wanted != SIZE_MAX && length && length / 8 != wanted)) {
		query_damaged(query, "wrong number of blocks");
		return;
	}
	if (length)
		query->status =
			ledger_memory(query->ledger,
				      memory_new(length, 1, &made), query->why);
	if (query->status != STATUS_OK)
		return;
	for (size_t i = 0; i < length / 8; i++)
		made[i] = word_at(bytes + 8 * i);
	memcpy(words, &made, sizeof(made));
	*count = length / 8;
}
