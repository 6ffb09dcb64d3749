#include "corpus/set_file.h"

#include "corpus/file_read.h"
#include "corpus/set_command.h"
#include "corpus/set_loader.h"
#include "corpus/set_path.h"
#include "corpus/set_values.h"

#include <ini.h>
#include <string.h>

/* A set file is a page of text; what is longer is some other file. */
#define FILE_BYTES_MAX (1u << 20)
/* Defaults of the gate: 0.3% of achieved bits, 15% of relative speed. */
#define TOLERANCE 0.003
#define SPEED_TOLERANCE 0.15

void fail_at(struct loader *loader, unsigned line, enum status status)
{
	loader->status = status;
	if (status == STATUS_NO_MEMORY)
		(void)reason_give(loader->why, status, "out of memory");
	reason_prefix(loader->why, "%s:%u: ", loader->path, line);
}

static enum status store_pair(struct loader *loader, const char *name,
			      const char *value)
{
	struct reason *why = loader->why;
	unsigned *line;
	size_t key;

	TRY(key_find(loader->sort, name, &key, why));
	line = &loader->key_lines[key];
	if (*line)
		return reason_give(why, STATUS_BAD_USAGE,
				   "is in line %u already", *line);
	*line = loader->line;
	if (!*value)
		return reason_give(why, STATUS_BAD_USAGE,
				   "has no value; give one or leave the line "
				   "out");
	return key_store(loader->sort, key, section_current(loader), value,
			 why);
}

/* inih's handler; nonzero is its word for success. */
static int take_pair(void *user, const char *section, const char *name,
		     const char *value)
{
	struct loader *loader = user;
	enum status status;

	if (loader->status == STATUS_OK && !loader->opened)
		section_open(loader, section);
	if (loader->status != STATUS_OK)
		return 0;
	status = store_pair(loader, name, value);
	if (status == STATUS_OK)
		return 1;
	reason_prefix(loader->why, "[%s] %s: ", section, name);
	fail_at(loader, loader->line, status);
	return 0;
}

static enum status finish_corpus(const struct loader *loader,
				 struct set_corpus *corpus)
{
	const struct set *set = loader->set;
	struct reason *why = loader->why;

	if (!*corpus->file)
		return reason_give(why, STATUS_BAD_USAGE,
				   "no key file: write file = PATH, relative "
				   "to the folder of the set file");
	if (corpus->rolling && *corpus->sha256)
		return reason_give(why, STATUS_BAD_USAGE,
				   "feed = rolling has new bytes every time: "
				   "leave sha256 out");
	corpus->within = loader->outside ? NULL : set->folder;
	return path_join(set->folder, loader->outside, &corpus->file, why);
}

static enum status finish_codec(const struct loader *loader,
				struct set_codec *codec)
{
	struct reason *why = loader->why;

	if (*codec->compress && !*codec->decompress)
		return reason_give(why, STATUS_BAD_USAGE,
				   "compress without decompress: every cell is "
				   "decoded and compared");
	if (!*codec->compress && *codec->decompress)
		return reason_give(why, STATUS_BAD_USAGE,
				   "decompress without compress");
	if (!codec->levels.count && !*codec->compress && !*codec->library)
		return reason_give(why, STATUS_BAD_USAGE,
				   "no key levels: write levels = 1 6 9, say");
	if (!codec->layouts.count)
		TRY(value_list("whole", &codec->layouts, why));
	return own_codec_finish(codec, loader->set->folder, loader->outside,
				why);
}

/* What can only be said once all keys of all sections are there. */
static void finish(struct loader *loader)
{
	struct set *set = loader->set;
	enum status status = STATUS_OK;

	if (!*set->name)
		REFUSE(loader, loader->set_line ? loader->set_line : 1,
		       "[set] name: is missing; a set needs [set] and, in it, "
		       "name = NAME");
	else if (!set->corpus_count)
		REFUSE(loader, loader->line,
		       "no corpus; add a section [corpus NAME]");
	for (size_t i = 0; loader->status == STATUS_OK && i < set->corpus_count;
	     i++) {
		status = finish_corpus(loader, &set->corpora[i]);
		if (status == STATUS_OK)
			continue;
		reason_prefix(loader->why,
			      "[corpus %s]: ", set->corpora[i].name);
		fail_at(loader, set->corpora[i].line, status);
	}
	for (size_t i = 0; loader->status == STATUS_OK && i < set->codec_count;
	     i++) {
		status = finish_codec(loader, &set->codecs[i]);
		if (status == STATUS_OK)
			continue;
		reason_prefix(loader->why, "[codec %s]: ", set->codecs[i].name);
		fail_at(loader, set->codecs[i].line, status);
	}
}

static enum status parse_into(struct loader *loader)
{
	int line;

	TRY(path_folder(loader->path, &loader->set->folder));
	TRY(value_text(loader->path, &loader->set->path));
	digest_sha256(loader->text.bytes, loader->text.length,
		      loader->set->digest);
	/* A byte order mark is allowed and means nothing. */
	if (loader->text.length >= 3 &&
	    memcmp(loader->text.bytes, "\xEF\xBB\xBF", 3) == 0)
		loader->offset = 3;
	line = ini_parse_stream(loader_read_line, loader, take_pair, loader);
	if (loader->status == STATUS_OK && line > 0)
		REFUSE(loader, (unsigned)line,
		       "neither a [section] nor a \"key = value\"");
	if (loader->status == STATUS_OK)
		section_close(loader);
	if (loader->status == STATUS_OK)
		finish(loader);
	return loader->status;
}

enum status set_parse(struct slice text, const char *path, bool outside,
		      struct set *set, struct reason *why)
{
	struct set made = {
		.gap_limit = -1,
		.tolerance = TOLERANCE,
		.speed_tolerance = SPEED_TOLERANCE,
	};
	struct reason spare = {""};
	struct loader loader = {
		.set = &made,
		.path = path,
		.outside = outside,
		.text = text,
		.why = why ? why : &spare,
	};
	enum status status;

	loader.why->text[0] = '\0';
	status = parse_into(&loader);
	if (status != STATUS_OK) {
		set_release(&made);
		if (!loader.why->text[0])
			(void)reason_give(why, status, "%s: %s", path,
					  status_words(status));
		return status;
	}
	*set = made;
	return STATUS_OK;
}

enum status set_load(const char *path, bool outside, struct set *set,
		     struct reason *why)
{
	const struct read_limit limit = {FILE_BYTES_MAX, 1};
	enum status status;
	struct slice text;
	uint8_t *bytes;

	TRY(file_read(path, &limit, &bytes, &text.length, why));
	text.bytes = bytes;
	status = set_parse(text, path, outside, set, why);
	memory_free(bytes);
	return status;
}

static void release_codec(struct set_codec *codec)
{
	text_list_release(&codec->levels);
	text_list_release(&codec->layouts);
	memory_free(codec->compress);
	memory_free(codec->decompress);
	memory_free(codec->library);
	memory_free(codec->options);
	memory_free(codec->dictionary);
	memory_free(codec->containers);
	memory_free(codec->library_path);
	text_list_release(&codec->compress_words);
	text_list_release(&codec->decompress_words);
}

void set_release(struct set *set)
{
	for (size_t i = 0; i < set->corpus_count; i++) {
		memory_free(set->corpora[i].file);
		memory_free(set->corpora[i].origin);
	}
	for (size_t i = 0; i < set->codec_count; i++)
		release_codec(&set->codecs[i]);
	memory_free(set->corpora);
	memory_free(set->codecs);
	memory_free(set->path);
	memory_free(set->folder);
	*set = (struct set){0};
}
