#include "symbols/sequence.h"

#include "symbols/mapping.h"

#include <string.h>

size_t line_of(struct slice bytes, size_t offset)
{
	size_t line = 1;

	for (size_t i = 0; i < offset; i++)
		line += bytes.bytes[i] == '\n';
	return line;
}

static enum status check_width(struct slice bytes, size_t width,
			       const char *what, struct reason *why)
{
	if (!width || bytes.length % width == 0)
		return STATUS_OK;
	return reason_give(
		why, STATUS_BAD_INPUT,
		"%zu bytes are no multiple of the %zu bytes of a %s: "
		"%zu are left over",
		bytes.length, width, what, bytes.length % width);
}

static enum status check_rules(struct slice bytes,
			       const struct symbol_rules *rules,
			       struct reason *why)
{
	const struct mapping *mapping = &mappings[rules->kind];

	if (!bytes.length)
		return reason_give(why, STATUS_BAD_INPUT,
				   "the corpus is empty: nothing to divide by");
	if ((rules->record_bytes > 0) + rules->record_lines +
		    (rules->record_count > 0) >
	    1)
		return reason_give(why, STATUS_BAD_USAGE,
				   "records are lines, or of fixed width, "
				   "or so many in all: one of these, not "
				   "both");
	if (rules->record_bytes && !mapping->symbol_bytes)
		return reason_give(why, STATUS_BAD_USAGE,
				   "symbols of the kind %s have no fixed width "
				   "that records of %zu bytes could hold: use "
				   "records = lines",
				   mapping->name, rules->record_bytes);
	TRY(check_width(bytes, mapping->symbol_bytes, mapping->name, why));
	return check_width(bytes, rules->record_bytes, "record", why);
}

static size_t count_records(struct slice bytes,
			    const struct symbol_rules *rules)
{
	if (rules->record_bytes)
		return bytes.length / rules->record_bytes;
	if (!rules->record_lines)
		return rules->record_count;
	return line_of(bytes, bytes.length) -
	       (bytes.bytes[bytes.length - 1] == '\n');
}

enum status sequence_init(struct sequence *sequence, struct slice bytes,
			  const struct symbol_rules *rules, struct reason *why)
{
	const struct mapping *mapping = &mappings[rules->kind];
	struct sequence made = {
		.kind = rules->kind,
		.alphabet = mapping->alphabet,
		.record_bytes = rules->record_bytes,
	};
	enum status status;

	TRY(check_rules(bytes, rules, why));
	(void)reason_give(why, STATUS_NO_MEMORY,
			  "out of memory: %zu bytes do not fit as symbols of "
			  "the kind %s",
			  bytes.length, mapping->name);
	status = mapping->map(&made, bytes, why);
	if (status != STATUS_OK) {
		sequence_release(&made);
		return status;
	}
	if (why)
		why->text[0] = '\0';
	made.records = count_records(bytes, rules);
	*sequence = made;
	return STATUS_OK;
}

void sequence_release(struct sequence *sequence)
{
	for (unsigned i = 0; i < 3; i++)
		memory_free(sequence->owned[i]);
	*sequence = (struct sequence){0};
}

size_t sequence_byte_of(const struct sequence *sequence, size_t i)
{
	if (sequence->starts)
		return sequence->starts[i];
	if (sequence->kind == SYMBOL_BIT)
		return i / 8;
	if (sequence->kind == SYMBOL_LETTERS27)
		return i;
	return i * mappings[sequence->kind].symbol_bytes;
}
