#include "corpus/set_command.h"

#include "corpus/set_path.h"
#include "corpus/set_values.h"

#include <string.h>

#define BLANKS " \t"
#define FOLDER_WORD "{folder}"
#define LEVEL_WORD "{level}"

/* A command line being read. */
struct reading {
	const char *next;
	const char *folder; /* from the root */
	struct buffer word;
	struct reason *why;
};

static MUST_USE enum status add(struct reading *reading, const char *bytes,
				size_t length)
{
	if (buffer_add(&reading->word, bytes, length) == STATUS_OK)
		return STATUS_OK;
	return reason_give(reading->why, STATUS_NO_MEMORY, "out of memory");
}

/* One character, with the backslash before it or {folder} as one. */
static MUST_USE enum status take_one(struct reading *reading)
{
	const char *at = reading->next;

	if (strncmp(at, FOLDER_WORD, strlen(FOLDER_WORD)) == 0) {
		reading->next += strlen(FOLDER_WORD);
		return add(reading, reading->folder, strlen(reading->folder));
	}
	if (*at == '\\' && at[1])
		at++;
	reading->next = at + 1;
	return add(reading, at, 1);
}

static MUST_USE enum status take_quoted(struct reading *reading)
{
	char quote = *reading->next++;

	while (*reading->next && *reading->next != quote) {
		if (quote == '"') {
			TRY(take_one(reading));
			continue;
		}
		TRY(add(reading, reading->next++, 1));
	}
	if (!*reading->next)
		return reason_give(reading->why, STATUS_BAD_USAGE,
				   "a quotation begins with %c and does not "
				   "end",
				   quote);
	reading->next++;
	return STATUS_OK;
}

static MUST_USE enum status take_word(struct reading *reading)
{
	reading->word.length = 0;
	while (*reading->next && !strchr(BLANKS, *reading->next)) {
		if (*reading->next == '\'' || *reading->next == '"')
			TRY(take_quoted(reading));
		else
			TRY(take_one(reading));
	}
	return add(reading, "", 1);
}

static MUST_USE enum status keep_word(const struct reading *reading,
				      struct text_list *words)
{
	char *copy;

	TRY(memory_resize(&words->texts, words->count + 1,
			  sizeof(*words->texts)));
	TRY(memory_new(reading->word.length, 1, &copy));
	memcpy(copy, reading->word.bytes, reading->word.length);
	words->texts[words->count++] = copy;
	return STATUS_OK;
}

static MUST_USE enum status split(struct reading *reading,
				  struct text_list *words)
{
	for (;;) {
		reading->next += strspn(reading->next, BLANKS);
		if (!*reading->next)
			return STATUS_OK;
		TRY(take_word(reading));
		TRY(keep_word(reading, words));
	}
}

enum status command_path(const char *folder, bool outside, char **path,
			 struct reason *why)
{
	char *absolute;
	enum status status;

	while (strncmp(*path, "./", 2) == 0)
		memmove(*path, *path + 2, strlen(*path + 2) + 1);
	TRY(path_absolute(folder, &absolute));
	status = path_join(absolute, outside, path, why);
	if (status == STATUS_OK && !outside && !path_is_within(*path, absolute))
		status = reason_give(why, STATUS_BAD_USAGE,
				     "%s: is a link that leaves the folder of "
				     "the set file; allow it with --outside",
				     *path);
	memory_free(absolute);
	return status;
}

static MUST_USE enum status resolve(const char *folder, bool outside,
				    struct text_list *words, struct reason *why)
{
	if (!words->count || !*words->texts[0])
		return reason_give(why, STATUS_BAD_USAGE, "names no program");
	if (!strchr(words->texts[0], '/'))
		return STATUS_OK;
	return command_path(folder, outside, &words->texts[0], why);
}

enum status command_words(const char *text, const char *folder, bool outside,
			  struct text_list *words, struct reason *why)
{
	struct text_list made = {NULL, 0};
	struct reading reading = {.next = text, .why = why};
	char *absolute;
	enum status status;

	TRY(path_absolute(folder, &absolute));
	reading.folder = absolute;
	buffer_init(&reading.word, 1 << 16);
	status = split(&reading, &made);
	buffer_release(&reading.word);
	memory_free(absolute);
	if (status == STATUS_OK)
		status = resolve(folder, outside, &made, why);
	if (status == STATUS_OK)
		*words = made;
	else
		text_list_release(&made);
	return status;
}

bool command_has_level(const struct text_list *words)
{
	for (size_t i = 0; i < words->count; i++) {
		if (strstr(words->texts[i], LEVEL_WORD))
			return true;
	}
	return false;
}

static MUST_USE enum status finish_commands(struct set_codec *codec,
					    const char *folder, bool outside,
					    struct reason *why)
{
	enum status status = command_words(codec->compress, folder, outside,
					   &codec->compress_words, why);

	if (status != STATUS_OK) {
		reason_prefix(why, "compress: ");
		return status;
	}
	status = command_words(codec->decompress, folder, outside,
			       &codec->decompress_words, why);
	if (status != STATUS_OK) {
		reason_prefix(why, "decompress: ");
		return status;
	}
	if (codec->levels.count && !command_has_level(&codec->compress_words))
		return reason_give(why, STATUS_BAD_USAGE,
				   "levels: compress has no {level} where one "
				   "could go: write it, or leave levels out");
	if (!codec->levels.count &&
	    (command_has_level(&codec->compress_words) ||
	     command_has_level(&codec->decompress_words)))
		return reason_give(why, STATUS_BAD_USAGE,
				   "{level} has no levels: write levels = 1 9, "
				   "say");
	return STATUS_OK;
}

enum status own_codec_finish(struct set_codec *codec, const char *folder,
			     bool outside, struct reason *why)
{
	enum status status;

	if (*codec->compress && *codec->library)
		return reason_give(why, STATUS_BAD_USAGE,
				   "compress and library: a codec is one or "
				   "the other");
	if (!*codec->compress && !*codec->library &&
	    (codec->time_limit_seconds || codec->memory_limit_bytes))
		return reason_give(why, STATUS_BAD_USAGE,
				   "time-limit and memory-limit are for codecs "
				   "with compress or library");
	if (*codec->compress)
		return finish_commands(codec, folder, outside, why);
	if (!*codec->library)
		return STATUS_OK;
	TRY(value_text(codec->library, &codec->library_path));
	status = command_path(folder, outside, &codec->library_path, why);
	if (status != STATUS_OK)
		reason_prefix(why, "library: ");
	return status;
}
