#include "codec/house.h"

#include <stdio.h>
#include <string.h>

/* Coding may make data longer, but a stream of twice its length is broken. */
#define ROOM_FACTOR 2
#define ROOM_BYTES ((size_t)1 << 20)
/* A private folder may hold the input, the output and some more. */
#define FILE_FACTOR 4
#define FILE_BYTES ((uint64_t)64 << 20)
/* No one knows; between zlib and xz at their strongest. */
#define WORK_UNKNOWN 0.3
#define LEVEL_WORD "{level}"

struct house {
	struct codec row;
	struct house_words words;
	char name[CELL_NAME_BYTES];
};

enum house_part { PART_COMPRESS, PART_DECOMPRESS, PART_AGAIN, HOUSE_PARTS };

/* One of the three that code for a cell, each apart from the others. */
struct house_part_state {
	struct child_plan plan;
	char **words;        /* owned, each too, ended by NULL */
	struct child *child; /* a library's, once it is asked */
};

struct house_session {
	const struct house *house;
	const struct codec_setting *setting;
	struct house_part_state parts[HOUSE_PARTS];
};

/* word with each {level} in it replaced; owned by the caller. */
static MUST_USE enum status fill_level(const char *word, const char *level,
				       char **filled)
{
	size_t room = 1, step = strlen(LEVEL_WORD), length = strlen(level);
	char *to;

	for (const char *at = word; *at; at++)
		room += strncmp(at, LEVEL_WORD, step) == 0 ? length + 1 : 1;
	TRY(memory_new(room, 1, filled));
	to = *filled;
	while (*word) {
		if (strncmp(word, LEVEL_WORD, step) == 0) {
			memcpy(to, level, length);
			to += length;
			word += step;
		} else {
			*to++ = *word++;
		}
	}
	*to = '\0';
	return STATUS_OK;
}

static MUST_USE enum status fill_words(char *const *words, size_t count,
				       const char *level,
				       struct house_part_state *part)
{
	TRY(memory_new_zeroed(count + 1, sizeof(*part->words), &part->words));
	for (size_t i = 0; i < count; i++)
		TRY(fill_level(words[i], level, &part->words[i]));
	part->plan.words = part->words;
	return STATUS_OK;
}

static void bound(const struct house *house, struct child_plan *plan)
{
	const struct house_words *words = &house->words;

	plan->host = words->host ? words->host : "codec-host";
	plan->library = words->library != NULL;
	plan->bounds.seconds = words->time_limit_seconds
				       ? words->time_limit_seconds
				       : HOUSE_SECONDS;
	plan->bounds.memory_bytes = words->memory_limit_bytes
					    ? words->memory_limit_bytes
					    : HOUSE_MEMORY_BYTES;
	plan->bounds.file_bytes = FILE_BYTES;
}

static MUST_USE enum status init_part(struct house_session *session,
				      enum house_part which)
{
	const struct house_words *words = &session->house->words;
	struct house_part_state *part = &session->parts[which];
	const char *level = session->setting->text;

	bound(session->house, &part->plan);
	if (words->library)
		return fill_words(&words->library, 1, "", part);
	if (which == PART_DECOMPRESS)
		return fill_words(words->decompress, words->decompress_count,
				  level, part);
	return fill_words(words->compress, words->compress_count, level, part);
}

enum status house_open(const struct house *house,
		       const struct codec_setting *setting, size_t pages,
		       struct house_session **session, struct reason *why)
{
	struct house_session *made;
	enum status status = STATUS_OK;

	*session = NULL;
	if (!house)
		return STATUS_OK;
	if (!house->words.library && pages > HOUSE_PAGES_MOST)
		return reason_give(why, STATUS_TOO_SHORT,
				   "%zu pages, a process each, are more than "
				   "%d: take larger pages, or make the codec a "
				   "library",
				   pages, HOUSE_PAGES_MOST);
	if (memory_new_zeroed(1, sizeof(*made), &made) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	made->house = house;
	made->setting = setting;
	for (size_t i = 0; status == STATUS_OK && i < HOUSE_PARTS; i++)
		status = init_part(made, (enum house_part)i);
	if (status != STATUS_OK) {
		house_close(made);
		return reason_give(why, status, "out of memory");
	}
	*session = made;
	return STATUS_OK;
}

enum status house_end(struct house_session *session, struct reason *why)
{
	for (size_t i = 0; session && i < HOUSE_PARTS; i++) {
		if (session->parts[i].child)
			TRY(child_end(session->parts[i].child, why));
	}
	return STATUS_OK;
}

void house_close(struct house_session *session)
{
	if (!session)
		return;
	for (size_t i = 0; i < HOUSE_PARTS; i++) {
		struct house_part_state *part = &session->parts[i];

		child_close(part->child);
		for (size_t j = 0; part->words && part->words[j]; j++)
			memory_free(part->words[j]);
		memory_free(part->words);
	}
	memory_free(session);
}

/* One request to a library, which is started for the first of them. */
static MUST_USE enum status ask(const struct codec_job *job,
				enum house_part which, size_t room,
				struct buffer *out, struct reason *why)
{
	struct house_part_state *part = &job->session->parts[which];
	struct host_request request = {.action = which == PART_DECOMPRESS
							 ? HOST_DECOMPRESS
							 : HOST_COMPRESS,
				       .length = job->input.length,
				       .room = room};

	if (strcmp(job->setting->text, HOUSE_LEVEL) != 0)
		(void)snprintf(request.level, sizeof(request.level), "%s",
			       job->setting->text);
	if (!part->child)
		TRY(child_open(&part->plan, &part->child, why));
	return child_ask(part->child, &request, job->input, out, job->usage,
			 why);
}

/* With at most room more bytes in out than there are. */
static MUST_USE enum status code(const struct codec_job *job,
				 enum house_part which, size_t room,
				 struct buffer *out, struct reason *why)
{
	struct house_part_state *part = &job->session->parts[which];
	size_t limit = out->limit;
	enum status status;

	if (room < limit - out->length)
		out->limit = out->length + room;
	room = out->limit - out->length;
	part->plan.bounds.file_bytes =
		FILE_BYTES + FILE_FACTOR * (uint64_t)room;
	if (part->plan.library)
		status = ask(job, which, room, out, why);
	else
		status = child_run(&part->plan, job->input, out, job->usage,
				   why);
	out->limit = limit;
	if (status != STATUS_OK)
		reason_prefix(why, "%s: ",
			      which == PART_DECOMPRESS ? "decompress"
						       : "compress");
	return status;
}

static MUST_USE enum status house_encode(const struct codec_job *job,
					 struct buffer *out, struct reason *why)
{
	size_t length = job->input.length;

	if (length > (SIZE_MAX - ROOM_BYTES) / ROOM_FACTOR)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	return code(job, job->again ? PART_AGAIN : PART_COMPRESS,
		    length * ROOM_FACTOR + ROOM_BYTES, out, why);
}

static MUST_USE enum status house_decode(const struct codec_job *job,
					 struct buffer *out, struct reason *why)
{
	return code(job, PART_DECOMPRESS, out->limit - out->length, out, why);
}

static MUST_USE enum status
house_parse(const char *text, struct codec_setting *setting, struct reason *why)
{
	if (strlen(text) >= sizeof(setting->text))
		return reason_give(why, STATUS_BAD_USAGE,
				   "level '%s': at most %d characters", text,
				   CELL_NAME_BYTES - 1);
	(void)snprintf(setting->text, sizeof(setting->text), "%s", text);
	return STATUS_OK;
}

static MUST_USE enum status check_name(const char *name, struct reason *why)
{
	if (codec_find(name))
		return reason_give(why, STATUS_BAD_USAGE,
				   "is built in: give a codec of your own "
				   "another name");
	if (strlen(name) >= CELL_NAME_BYTES)
		return reason_give(why, STATUS_BAD_USAGE,
				   "the name has more than %d characters",
				   CELL_NAME_BYTES - 1);
	return STATUS_OK;
}

enum status house_new(const struct house_words *words, struct house **house,
		      struct reason *why)
{
	struct house *made;

	TRY(check_name(words->name, why));
	if (memory_new(1, sizeof(*made), &made) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	*made = (struct house){.words = *words,
			       .row = {.summary = "a codec of the set file",
				       .source = "the set file",
				       .levels = "as the set file says",
				       .work = WORK_UNKNOWN,
				       .parse = house_parse,
				       .encode = house_encode,
				       .decode = house_decode}};
	(void)snprintf(made->name, sizeof(made->name), "%s", words->name);
	made->row.name = made->name;
	made->row.house = made;
	*house = made;
	return STATUS_OK;
}

void house_free(struct house *house)
{
	memory_free(house);
}

const struct codec *house_codec(const struct house *house)
{
	return &house->row;
}

bool house_program(const struct house *house, char path[HOUSE_PATH_BYTES])
{
	const struct house_words *words = &house->words;

	return child_find(words->library ? words->library : words->compress[0],
			  path);
}
