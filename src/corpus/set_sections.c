#include "corpus/set_loader.h"

#include "corpus/set_values.h"
#include "corpus/suggest.h"

#include <string.h>

static enum section_sort sort_of(const char *word)
{
	if (strcmp(word, "set") == 0)
		return SECTION_SET;
	if (strcmp(word, "corpus") == 0)
		return SECTION_CORPUS;
	return strcmp(word, "codec") == 0 ? SECTION_CODEC : SECTION_NONE;
}

static enum status refuse_section(const char *word, struct reason *why)
{
	static const char *const names[] = {"set", "corpus", "codec"};
	const char *near = suggest_name(word, names, 3);

	return reason_give(why, STATUS_BAD_USAGE,
			   "unknown section; %s%s%sthere are [set], [corpus "
			   "NAME] and [codec NAME]",
			   near ? "did you mean " : "", near ? near : "",
			   near ? "? " : "");
}

/* Line of the section's namesake; 0: it is the first. */
static unsigned namesake(const struct loader *loader, const char *name)
{
	const struct set *set = loader->set;

	if (loader->sort == SECTION_SET)
		return loader->set_line;
	for (size_t i = 0;
	     loader->sort == SECTION_CORPUS && i < set->corpus_count; i++) {
		if (strcmp(set->corpora[i].name, name) == 0)
			return set->corpora[i].line;
	}
	for (size_t i = 0;
	     loader->sort == SECTION_CODEC && i < set->codec_count; i++) {
		if (strcmp(set->codecs[i].name, name) == 0)
			return set->codecs[i].line;
	}
	return 0;
}

static enum status add_corpus(struct loader *loader, const char *name)
{
	struct set *set = loader->set;
	struct set_corpus *corpus, made = {.line = loader->heading_line};

	TRY(value_name(name, made.name, loader->why));
	TRY(memory_resize(&set->corpora, set->corpus_count + 1, sizeof(made)));
	corpus = &set->corpora[set->corpus_count++];
	*corpus = made;
	TRY(value_text("", &corpus->file));
	return value_text("", &corpus->origin);
}

static enum status add_codec(struct loader *loader, const char *name)
{
	struct set *set = loader->set;
	struct set_codec *codec, made = {.line = loader->heading_line};

	TRY(value_name(name, made.name, loader->why));
	TRY(memory_resize(&set->codecs, set->codec_count + 1, sizeof(made)));
	codec = &set->codecs[set->codec_count++];
	*codec = made;
	TRY(value_text("", &codec->compress));
	TRY(value_text("", &codec->decompress));
	TRY(value_text("", &codec->library));
	TRY(value_text("", &codec->options));
	TRY(value_text("", &codec->dictionary));
	return value_text("", &codec->containers);
}

static enum status add_section(struct loader *loader, const char *name)
{
	unsigned first = namesake(loader, name);

	if (first)
		return reason_give(loader->why, STATUS_BAD_USAGE,
				   "there is one in line %u already", first);
	if (loader->sort == SECTION_CORPUS)
		return add_corpus(loader, name);
	if (loader->sort == SECTION_CODEC)
		return add_codec(loader, name);
	loader->set_line = loader->heading_line;
	return STATUS_OK;
}

static enum status open_named(struct loader *loader, const char *section)
{
	size_t length = strcspn(section, " \t");
	const char *name = section + length + strspn(section + length, " \t");
	char word[INIH_WORD_BYTES];

	memcpy(word, section, length);
	word[length] = '\0';
	loader->sort = sort_of(word);
	if (loader->sort == SECTION_NONE)
		return refuse_section(word, loader->why);
	if (loader->sort == SECTION_SET && *name)
		return reason_give(loader->why, STATUS_BAD_USAGE,
				   "takes no name; write [set] and a key name");
	if (loader->sort != SECTION_SET && !*name)
		return reason_give(loader->why, STATUS_BAD_USAGE,
				   "a name is wanted, as in [corpus duty-log] "
				   "or [codec zstd]");
	return add_section(loader, name);
}

void section_open(struct loader *loader, const char *section)
{
	enum status status;

	loader->opened = true;
	memset(loader->key_lines, 0, sizeof(loader->key_lines));
	if (!loader->heading_line) {
		REFUSE(loader, loader->line,
		       "a key before any section; begin with [set]");
		return;
	}
	status = open_named(loader, section);
	if (status == STATUS_OK)
		return;
	reason_prefix(loader->why, "[%s]: ", section);
	fail_at(loader, loader->heading_line, status);
}

void section_close(struct loader *loader)
{
	if (loader->heading_line && !loader->opened)
		REFUSE(loader, loader->heading_line,
		       "a section without a single key");
}

void *section_current(struct loader *loader)
{
	struct set *set = loader->set;

	if (loader->sort == SECTION_CORPUS)
		return &set->corpora[set->corpus_count - 1];
	if (loader->sort == SECTION_CODEC)
		return &set->codecs[set->codec_count - 1];
	return set;
}
