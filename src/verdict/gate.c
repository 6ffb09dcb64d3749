#include "verdict/gate_parts.h"

#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/memory.h"

static const char *const names[GATE_RULE_COUNT] = {
	[GATE_LOSSLESS] = "lossless",
	[GATE_BROKEN] = "broken",
	[GATE_SIZE] = "size",
	[GATE_SIZE_KIND] = "size-of-kind",
	[GATE_GAP_LIMIT] = "gap-limit",
	[GATE_FLOOR_TAKEN] = "floor-taken",
	[GATE_CORPUS_CHANGED] = "corpus-changed",
	[GATE_SPEED] = "speed",
	[GATE_MEMORY] = "memory",
	[GATE_MISSING] = "missing",
	[GATE_NOTE] = "note",
};

const char *gate_rule_name(enum gate_rule rule)
{
	return names[rule];
}

struct gate_check *gate_add(struct gate *gate, enum gate_rule rule,
			    enum gate_outcome outcome, const char *corpus,
			    const struct cell_key *key)
{
	struct gate_check *check;

	if (gate->status == STATUS_OK && gate->count == gate->room) {
		size_t room = gate->room ? 2 * gate->room : 64;

		gate->status = memory_resize(&gate->checks, room,
					     sizeof(*gate->checks));
		if (gate->status == STATUS_OK)
			gate->room = room;
	}
	if (gate->status != STATUS_OK)
		return NULL;
	check = &gate->checks[gate->count++];
	*check = (struct gate_check){.rule = rule, .outcome = outcome};
	(void)snprintf(check->corpus, sizeof(check->corpus), "%s", corpus);
	if (key)
		check->key = *key;
	return check;
}

void gate_say(struct gate_check *check, const char *format, ...)
{
	va_list arguments;

	if (!check)
		return;
	va_start(arguments, format);
	(void)vsnprintf(check->words, sizeof(check->words), format, arguments);
	va_end(arguments);
}

struct version_words gate_versions(const struct gate *gate, const char *library)
{
	const char *before = baseline_version(gate->pin, library);
	const char *now = baseline_version(gate->tonight, library);
	struct version_words words = {""};

	if (!*before && !*now)
		return words;
	if (strcmp(before, now) == 0)
		(void)snprintf(words.text, sizeof(words.text),
			       "; %s %s as at the pin", library, now);
	else
		(void)snprintf(words.text, sizeof(words.text),
			       "; %s %s at the pin, %s now", library,
			       *before ? before : "-", *now ? now : "-");
	return words;
}

static int by_place(const void *left, const void *right)
{
	const struct gate_check *a = left, *b = right;
	int order = strcmp(a->corpus, b->corpus);

	if (!order)
		order = strcmp(a->key.codec, b->key.codec);
	if (!order)
		order = strcmp(a->key.level, b->key.level);
	if (!order)
		order = strcmp(a->key.layout, b->key.layout);
	if (!order)
		order = (a->rule > b->rule) - (a->rule < b->rule);
	if (!order)
		order = (a->ratio > b->ratio) - (a->ratio < b->ratio);
	return order ? order : strcmp(a->words, b->words);
}

enum status gate_init(struct gate *gate, const struct baseline *pin,
		      const struct baseline *tonight, struct reason *why)
{
	struct gate made = {.pin = pin, .tonight = tonight};

	TRY(gate_refuse(pin, tonight, why));
	gate_notes(&made);
	gate_corpora(&made);
	gate_cells(&made);
	if (made.status == STATUS_OK)
		made.status = gate_kinds(&made);
	if (made.status != STATUS_OK) {
		gate_release(&made);
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	}
	if (made.count)
		qsort(made.checks, made.count, sizeof(*made.checks), by_place);
	*gate = made;
	return STATUS_OK;
}

void gate_release(struct gate *gate)
{
	memory_free(gate->checks);
	*gate = (struct gate){.pin = NULL};
}

size_t gate_count(const struct gate *gate, enum gate_outcome outcome)
{
	size_t count = 0;

	for (size_t i = 0; i < gate->count; i++)
		count += gate->checks[i].outcome == outcome;
	return count;
}

static bool same_check(const struct gate_check *a, const struct gate_check *b)
{
	return a->rule == b->rule && a->ratio == b->ratio &&
	       strcmp(a->corpus, b->corpus) == 0 &&
	       strcmp(a->key.codec, b->key.codec) == 0 &&
	       strcmp(a->key.level, b->key.level) == 0 &&
	       strcmp(a->key.layout, b->key.layout) == 0;
}

/* Older surveys are not timed again: a suspicion counts there. */
static bool breached_in(const struct gate *older,
			const struct gate_check *check)
{
	for (size_t i = 0; i < older->count; i++) {
		const struct gate_check *other = &older->checks[i];

		if ((other->outcome == GATE_BREACHED ||
		     other->outcome == GATE_SUSPECTED) &&
		    same_check(other, check))
			return true;
	}
	return false;
}

bool gate_reach_back(struct gate *gate, const struct gate *older)
{
	bool goes_on = false;
	int64_t last = gate->tonight->survey;

	/* Only runs that reach the survey just before this one go on. */
	for (size_t i = 0; i < gate->count; i++) {
		struct gate_check *check = &gate->checks[i];

		if (check->outcome == GATE_BREACHED && check->since &&
		    check->since < last)
			last = check->since;
	}
	for (size_t i = 0; i < gate->count; i++) {
		struct gate_check *check = &gate->checks[i];
		int64_t since =
			check->since ? check->since : gate->tonight->survey;

		if (check->outcome != GATE_BREACHED || since != last ||
		    !breached_in(older, check))
			continue;
		check->since = older->tonight->survey;
		(void)snprintf(check->since_started,
			       sizeof(check->since_started), "%s",
			       older->tonight->started);
		goes_on = true;
	}
	return goes_on;
}

/* A path as one shell word. */
static size_t quote(const char *text, char *out, size_t room)
{
	bool plain = *text != '\0';
	size_t used = 0;

	for (const char *c = text; *c; c++)
		plain &= strchr("abcdefghijklmnopqrstuvwxyz"
				"ABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789/._-",
				*c) != NULL;
	if (plain)
		return (size_t)snprintf(out, room, "%s", text);
	out[used++] = '\'';
	for (const char *c = text; *c && used + 6 < room; c++) {
		if (*c == '\'') {
			memcpy(out + used, "'\\''", 4);
			used += 4;
		} else {
			out[used++] = *c;
		}
	}
	out[used++] = '\'';
	out[used] = '\0';
	return used;
}

void gate_command(const struct gate_check *check, const char *set_path,
		  char command[GATE_COMMAND_BYTES])
{
	char path[GATE_COMMAND_BYTES / 2] = "SET";
	bool timed = check->rule == GATE_SPEED;
	bool cell = check->key.codec[0] != '\0';
	bool level = cell && check->key.level[0];

	if (*set_path)
		(void)quote(set_path, path, sizeof(path));
	(void)snprintf(command, GATE_COMMAND_BYTES,
		       "ratefloor survey %s%s%s%s%s%s%s%s --ledger "
		       "again.ledger",
		       path, check->corpus[0] ? " --corpus " : "",
		       check->corpus, cell ? " --codec " : "", check->key.codec,
		       level ? " --level " : "", level ? check->key.level : "",
		       timed ? "" : " --no-timing");
}
