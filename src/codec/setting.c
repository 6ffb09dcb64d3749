#include "codec/codec_rows.h"

#include <stdio.h>
#include <string.h>

/* What a dictionary may take: a page of text to what a reader keeps around. */
#define DICTIONARY_MIN ((size_t)256)
#define DICTIONARY_MAX ((size_t)16 << 20)
/* A word that asks for no option, to stand beside some in a list. */
#define PLAIN "plain"

static bool given(const char *word)
{
	return word && *word;
}

/* Puts a further word behind what the text says already. */
static MUST_USE enum status add_text(struct codec_setting *setting,
				     const char *prefix, const char *word,
				     struct reason *why)
{
	size_t used = strlen(setting->text);
	size_t room = sizeof(setting->text) - used;

	if (strlen(prefix) + strlen(word) >= room)
		return reason_give(why, STATUS_BAD_USAGE,
				   "'%s%s%s' is longer than the %d characters "
				   "that a level's name has",
				   setting->text, prefix, word,
				   CELL_NAME_BYTES - 1);
	(void)snprintf(setting->text + used, room, "%s%s", prefix, word);
	return STATUS_OK;
}

static MUST_USE enum status refuse_container(const struct codec *codec,
					     const char *word,
					     struct reason *why)
{
	char list[128] = "";

	for (size_t i = 0; codec->containers && codec->containers[i]; i++) {
		strcat(list, i ? " " : "");
		strcat(list, codec->containers[i]);
	}
	if (!*list)
		return reason_give(why, STATUS_BAD_USAGE,
				   "container '%s': %s has one container only, "
				   "leave the key out",
				   word, codec->name);
	return reason_give(why, STATUS_BAD_USAGE,
			   "container '%s': %s has %s (the first is the usual "
			   "one)",
			   word, codec->name, list);
}

static MUST_USE enum status set_container(const struct codec *codec,
					  const char *word,
					  struct codec_setting *setting,
					  struct reason *why)
{
	unsigned i = 0;

	while (codec->containers && codec->containers[i] &&
	       strcmp(codec->containers[i], word) != 0)
		i++;
	if (!codec->containers || !codec->containers[i])
		return refuse_container(codec, word, why);
	setting->container = i;
	return i ? add_text(setting, " ", word, why) : STATUS_OK;
}

static MUST_USE enum status set_option(const struct codec *codec,
				       const char *word, size_t length,
				       struct codec_setting *setting,
				       struct reason *why)
{
	char one[CELL_NAME_BYTES];

	if (!codec->option)
		return reason_give(why, STATUS_BAD_USAGE,
				   "%s has no options, leave the key out",
				   codec->name);
	if (!length || length >= sizeof(one))
		return reason_give(why, STATUS_BAD_USAGE,
				   "option '%.*s': %s has %s", (int)length,
				   word, codec->name, codec->options);
	memcpy(one, word, length);
	one[length] = '\0';
	return codec->option(one, setting, why);
}

static MUST_USE enum status set_options(const struct codec *codec,
					const char *words,
					struct codec_setting *setting,
					struct reason *why)
{
	const char *word = words;

	if (strcmp(words, PLAIN) == 0)
		return STATUS_OK;
	TRY(add_text(setting, " ", words, why));
	for (;;) {
		size_t length = strcspn(word, ",");

		TRY(set_option(codec, word, length, setting, why));
		if (!word[length])
			return STATUS_OK;
		word += length + 1;
	}
}

static MUST_USE enum status set_dictionary(const struct codec *codec,
					   const char *word,
					   struct codec_setting *setting,
					   struct reason *why)
{
	char size[CELL_NAME_BYTES];

	if (!codec->trainer)
		return reason_give(why, STATUS_BAD_USAGE,
				   "%s has no dictionaries, leave the key out",
				   codec->name);
	setting->dictionary_bytes =
		size_read(word, DICTIONARY_MIN, DICTIONARY_MAX);
	if (!setting->dictionary_bytes)
		return reason_give(why, STATUS_BAD_USAGE,
				   "dictionary '%s': a size of 256 bytes to "
				   "16M, like 64K, is wanted",
				   word);
	size_format(setting->dictionary_bytes, size);
	return add_text(setting, CELL_DICTIONARY, size, why);
}

enum status setting_parse(const struct codec *codec,
			  const struct setting_words *words,
			  struct codec_setting *setting, struct reason *why)
{
	struct codec_setting made = {.text = ""};

	TRY(codec->parse(words->level, &made, why));
	if (given(words->container))
		TRY(set_container(codec, words->container, &made, why));
	if (given(words->options))
		TRY(set_options(codec, words->options, &made, why));
	if (given(words->dictionary))
		TRY(set_dictionary(codec, words->dictionary, &made, why));
	*setting = made;
	return STATUS_OK;
}
