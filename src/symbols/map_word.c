/* Words: maximal runs of bytes that are no ASCII white space. */
#include "symbols/mapping.h"
#include "symbols/rank.h"

#include <stdlib.h>
#include <string.h>

/* The different words met so far. A place in slots holds a word's id + 1. */
struct lexicon {
	struct entry {
		struct slice word;
		uint32_t hash, id;
	} * words;       /* owned; in order of appearance, then sorted */
	uint32_t *slots; /* owned; a power of two of them */
	size_t count, room, slot_count;
};

static int is_blank(uint8_t byte)
{
	return byte == ' ' || (byte >= '\t' && byte <= '\r');
}

/* The next word at or after *offset, which moves past it; length 0: none. */
static struct slice next_word(struct slice bytes, size_t *offset)
{
	size_t i = *offset, begin;

	while (i < bytes.length && is_blank(bytes.bytes[i]))
		i++;
	begin = i;
	while (i < bytes.length && !is_blank(bytes.bytes[i]))
		i++;
	*offset = i;
	return (struct slice){bytes.bytes + begin, i - begin};
}

/* FNV-1a, folded to 32 bits. */
static uint32_t hash_of(struct slice word)
{
	uint64_t hash = UINT64_C(14695981039346656037);

	for (size_t i = 0; i < word.length; i++)
		hash = (hash ^ word.bytes[i]) * UINT64_C(1099511628211);
	return (uint32_t)(hash >> 32 ^ hash);
}

static void place(struct lexicon *lexicon, size_t id)
{
	size_t mask = lexicon->slot_count - 1;
	size_t slot = lexicon->words[id].hash & mask;

	while (lexicon->slots[slot])
		slot = (slot + 1) & mask;
	lexicon->slots[slot] = (uint32_t)id + 1;
}

/* Keeps a free place for every word and at least half the slots empty. */
static enum status make_room(struct lexicon *lexicon)
{
	size_t room = lexicon->room ? 2 * lexicon->room : 1024;
	uint32_t *slots;

	if (lexicon->count < lexicon->room)
		return STATUS_OK;
	if (room > UINT32_MAX / 2)
		return STATUS_NO_MEMORY;
	TRY(memory_resize(&lexicon->words, room, sizeof(*lexicon->words)));
	lexicon->room = room;
	TRY(memory_new_zeroed(2 * room, sizeof(*slots), &slots));
	memory_free(lexicon->slots);
	lexicon->slots = slots;
	lexicon->slot_count = 2 * room;
	for (size_t id = 0; id < lexicon->count; id++)
		place(lexicon, id);
	return STATUS_OK;
}

static enum status look_up(struct lexicon *lexicon, struct slice word,
			   uint32_t *id)
{
	uint32_t hash = hash_of(word);
	size_t slot;

	TRY(make_room(lexicon));
	slot = hash & (lexicon->slot_count - 1);
	for (; lexicon->slots[slot];
	     slot = (slot + 1) & (lexicon->slot_count - 1)) {
		uint32_t found = lexicon->slots[slot] - 1;
		struct entry *entry = &lexicon->words[found];

		if (entry->hash == hash && entry->word.length == word.length &&
		    memcmp(entry->word.bytes, word.bytes, word.length) == 0) {
			*id = found;
			return STATUS_OK;
		}
	}
	*id = (uint32_t)lexicon->count++;
	lexicon->words[*id] = (struct entry){word, hash, *id};
	lexicon->slots[slot] = *id + 1;
	return STATUS_OK;
}

/* Bytewise, a word before every longer one that begins with it. */
static int by_bytes(const void *left, const void *right)
{
	const struct slice *a = &((const struct entry *)left)->word;
	const struct slice *b = &((const struct entry *)right)->word;
	size_t common = a->length < b->length ? a->length : b->length;
	int order = memcmp(a->bytes, b->bytes, common);

	if (order)
		return order;
	return (a->length > b->length) - (a->length < b->length);
}

/* Leaves the rank of each id in slots. */
static void rank_words(struct lexicon *lexicon)
{
	qsort(lexicon->words, lexicon->count, sizeof(*lexicon->words),
	      by_bytes);
	for (size_t rank = 0; rank < lexicon->count; rank++)
		lexicon->slots[lexicon->words[rank].id] = (uint32_t)rank;
}

static size_t count_words(struct slice bytes)
{
	size_t offset = 0, n = 0;

	while (next_word(bytes, &offset).length)
		n++;
	return n;
}

static enum status list_words(struct sequence *sequence, struct slice bytes,
			      struct lexicon *lexicon, uint32_t *ids)
{
	size_t *starts = (size_t *)(void *)sequence->owned[2], offset = 0;

	for (size_t i = 0; i < sequence->n; i++) {
		struct slice word = next_word(bytes, &offset);

		starts[i] = (size_t)(word.bytes - bytes.bytes);
		TRY(look_up(lexicon, word, &ids[i]));
	}
	starts[sequence->n] = bytes.length;
	return STATUS_OK;
}

static enum status code_words(struct sequence *sequence, struct slice bytes,
			      struct lexicon *lexicon)
{
	size_t n = sequence->n;
	enum status status;
	uint32_t *ids;

	TRY(memory_new(n, sizeof(*ids), &ids));
	status = list_words(sequence, bytes, lexicon, ids);
	if (status == STATUS_OK)
		status = codes_new(sequence, n, lexicon->count);
	if (status == STATUS_OK) {
		rank_words(lexicon);
		for (size_t i = 0; i < n; i++)
			code_put(sequence, i, lexicon->slots[ids[i]]);
	}
	memory_free(ids);
	return status;
}

enum status map_word(struct sequence *sequence, struct slice bytes,
		     struct reason *why)
{
	struct lexicon lexicon = {0};
	enum status status;
	size_t *starts;

	sequence->n = count_words(bytes);
	if (!sequence->n)
		return reason_give(why, STATUS_BAD_INPUT,
				   "nothing but white space in %zu bytes: "
				   "there are no words",
				   bytes.length);
	TRY(memory_new(sequence->n + 1, sizeof(*starts), &starts));
	sequence->owned[2] = (uint8_t *)starts;
	sequence->starts = starts;
	status = code_words(sequence, bytes, &lexicon);
	memory_free(lexicon.words);
	memory_free(lexicon.slots);
	sequence->alphabet = sequence->distinct;
	sequence->canonical = bytes.bytes;
	sequence->canonical_bytes = bytes.length;
	return status;
}
