#include "corpus/set_keys.h"

#include "corpus/set_values.h"
#include "corpus/suggest.h"

#include <stddef.h>
#include <stdio.h>
#include <string.h>

/* What a value is; each names the parser and the type of its field. */
enum value_sort {
	VALUE_NAME,
	VALUE_SHORT,
	VALUE_TEXT,
	VALUE_PERCENT,
	VALUE_RATE,
	VALUE_KIND,
	VALUE_RECORDS,
	VALUE_DIGEST,
	VALUE_FEED,
	VALUE_UNIT,
	VALUE_SECONDS,
	VALUE_MEMORY,
	VALUE_LIST
};

struct key {
	const char *name;
	enum value_sort sort;
	size_t offset; /* of the field in its struct */
};

static const struct key set_keys[] = {
	{"name", VALUE_NAME, offsetof(struct set, name)},
	{"gap-limit", VALUE_PERCENT, offsetof(struct set, gap_limit)},
	{"tolerance", VALUE_PERCENT, offsetof(struct set, tolerance)},
	{"speed-tolerance", VALUE_PERCENT,
	 offsetof(struct set, speed_tolerance)},
	{"yardstick", VALUE_SHORT, offsetof(struct set, yardstick)},
	{"storage-unit", VALUE_UNIT, offsetof(struct set, storage_unit)},
};

static const struct key corpus_keys[] = {
	{"file", VALUE_TEXT, offsetof(struct set_corpus, file)},
	{"symbols", VALUE_KIND, offsetof(struct set_corpus, rules)},
	{"records", VALUE_RECORDS, offsetof(struct set_corpus, rules)},
	{"sha256", VALUE_DIGEST, offsetof(struct set_corpus, sha256)},
	{"licence", VALUE_SHORT, offsetof(struct set_corpus, licence)},
	{"origin", VALUE_TEXT, offsetof(struct set_corpus, origin)},
	{"known-rate", VALUE_RATE, 0},
	{"feed", VALUE_FEED, offsetof(struct set_corpus, rolling)},
};

static const struct key codec_keys[] = {
	{"levels", VALUE_LIST, offsetof(struct set_codec, levels)},
	{"layouts", VALUE_LIST, offsetof(struct set_codec, layouts)},
	{"feed", VALUE_FEED, offsetof(struct set_codec, rolling)},
	{"compress", VALUE_TEXT, offsetof(struct set_codec, compress)},
	{"decompress", VALUE_TEXT, offsetof(struct set_codec, decompress)},
	{"library", VALUE_TEXT, offsetof(struct set_codec, library)},
	{"options", VALUE_TEXT, offsetof(struct set_codec, options)},
	{"dictionary", VALUE_TEXT, offsetof(struct set_codec, dictionary)},
	{"containers", VALUE_TEXT, offsetof(struct set_codec, containers)},
	{"time-limit", VALUE_SECONDS,
	 offsetof(struct set_codec, time_limit_seconds)},
	{"memory-limit", VALUE_MEMORY,
	 offsetof(struct set_codec, memory_limit_bytes)},
};

#define COUNT_OF(array) (sizeof(array) / sizeof((array)[0]))

static const struct key *keys_of(enum section_sort sort, size_t *count)
{
	switch (sort) {
	case SECTION_SET:
		*count = COUNT_OF(set_keys);
		return set_keys;
	case SECTION_CORPUS:
		*count = COUNT_OF(corpus_keys);
		return corpus_keys;
	case SECTION_CODEC:
		*count = COUNT_OF(codec_keys);
		return codec_keys;
	case SECTION_NONE:
		break;
	}
	*count = 0;
	return NULL;
}

static enum status refuse_key(const struct key *keys, size_t count,
			      const char *name, struct reason *why)
{
	const char *names[SET_KEYS_MAX], *near;
	char list[256] = "";

	for (size_t i = 0; i < count; i++) {
		names[i] = keys[i].name;
		if (i)
			strcat(list, " ");
		strcat(list, names[i]);
	}
	near = suggest_name(name, names, count);
	if (near)
		return reason_give(why, STATUS_BAD_USAGE,
				   "unknown key; did you mean %s? There are: "
				   "%s",
				   near, list);
	return reason_give(why, STATUS_BAD_USAGE, "unknown key; there are: %s",
			   list);
}

enum status key_find(enum section_sort sort, const char *name, size_t *key,
		     struct reason *why)
{
	size_t count;
	const struct key *keys = keys_of(sort, &count);

	for (size_t i = 0; i < count; i++) {
		if (strcmp(keys[i].name, name) == 0) {
			*key = i;
			return STATUS_OK;
		}
	}
	return refuse_key(keys, count, name, why);
}

static enum status store_rate(struct set_corpus *corpus, const char *value,
			      struct reason *why)
{
	TRY(value_bits(value, &corpus->known_rate, why));
	corpus->rate_known = true;
	return STATUS_OK;
}

enum status key_store(enum section_sort sort, size_t key, void *section,
		      const char *value, struct reason *why)
{
	size_t count;
	const struct key *row = &keys_of(sort, &count)[key];
	void *field = (char *)section + row->offset;
	struct symbol_rules *rules = field;

	switch (row->sort) {
	case VALUE_NAME:
		return value_name(value, field, why);
	case VALUE_SHORT:
		return value_short(value, field, why);
	case VALUE_TEXT:
		return value_text(value, field);
	case VALUE_PERCENT:
		return value_percent(value, field, why);
	case VALUE_RATE:
		return store_rate(section, value, why);
	case VALUE_KIND:
		return symbol_kind_parse(value, &rules->kind, why);
	case VALUE_RECORDS:
		return value_records(value, rules, why);
	case VALUE_DIGEST:
		return value_digest(value, field, why);
	case VALUE_FEED:
		return value_feed(value, field, why);
	case VALUE_UNIT:
		return value_unit(value, field, why);
	case VALUE_SECONDS:
		return value_seconds(value, field, why);
	case VALUE_MEMORY:
		return value_memory(value, field, why);
	case VALUE_LIST:
		return value_list(value, field, why);
	}
	return STATUS_BAD_USAGE;
}
