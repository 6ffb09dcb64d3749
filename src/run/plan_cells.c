#include "run/plan_cells.h"

#include "corpus/set_values.h"

#include <string.h>

/* The lists of one codec section. */
struct section {
	const struct set_codec *declared;
	const struct codec *codec;
	struct text_list containers, options, dictionaries; /* owned */
};

/* What all cells of a plan are made with. */
struct cell_maker {
	struct plan *plan;
	const struct selection *selection;
	struct section section; /* the one at hand */
	size_t place;           /* of the next cell of the set, chosen or not */
	struct reason *why;
};

static bool is_own(const struct set_codec *declared)
{
	return *declared->compress || *declared->library;
}

static MUST_USE enum status add_house(struct plan *plan,
				      const struct set_codec *declared,
				      const char *host, struct reason *why)
{
	const struct house_words words = {
		.name = declared->name,
		.compress = declared->compress_words.texts,
		.compress_count = declared->compress_words.count,
		.decompress = declared->decompress_words.texts,
		.decompress_count = declared->decompress_words.count,
		.library = declared->library_path,
		.host = host,
		.time_limit_seconds = declared->time_limit_seconds,
		.memory_limit_bytes = declared->memory_limit_bytes,
	};

	TRY(memory_resize(&plan->houses, plan->house_count + 1,
			  sizeof(*plan->houses)));
	TRY(house_new(&words, &plan->houses[plan->house_count], why));
	plan->house_count++;
	return STATUS_OK;
}

/* What belongs to a stranger runs only when its user says so. */
static MUST_USE enum status find_own(struct plan *plan,
				     const struct set_codec *declared,
				     const struct selection *selection,
				     const struct codec **codec,
				     struct reason *why)
{
	TRY(add_house(plan, declared, selection->codec_host, why));
	*codec = house_codec(plan->houses[plan->house_count - 1]);
	if (selection->codec_host ||
	    !names_hold(&selection->codecs, declared->name))
		return STATUS_OK;
	return reason_give(why, STATUS_BAD_USAGE,
			   "runs a program that the set file names: allow it "
			   "with --own-codecs, or choose others with --codec");
}

static MUST_USE enum status find_codec(struct plan *plan,
				       const struct set_codec *declared,
				       const struct selection *selection,
				       const struct codec **codec,
				       struct reason *why)
{
	if (is_own(declared))
		return find_own(plan, declared, selection, codec, why);
	*codec = codec_find(declared->name);
	if (*codec)
		return STATUS_OK;
	return reason_give(why, STATUS_BAD_USAGE,
			   "there is no built-in codec of that name; ratefloor "
			   "methods shows them");
}

static void section_release(struct section *section)
{
	text_list_release(&section->containers);
	text_list_release(&section->options);
	text_list_release(&section->dictionaries);
}

/* One list, with the key's name before what is wrong with it. */
static MUST_USE enum status read_list(const char *key, const char *text,
				      struct text_list *list,
				      struct reason *why)
{
	enum status status = value_list(text, list, why);

	if (status != STATUS_OK)
		reason_prefix(why, "%s: ", key);
	return status;
}

static bool has_pages(const struct set_codec *declared)
{
	for (size_t i = 0; i < declared->layouts.count; i++) {
		if (strcmp(declared->layouts.texts[i], "whole") != 0)
			return true;
	}
	return false;
}

static MUST_USE enum status section_init(struct cell_maker *maker,
					 const struct set_codec *declared)
{
	struct section *section = &maker->section;
	struct reason *why = maker->why;

	*section = (struct section){.declared = declared};
	TRY(find_codec(maker->plan, declared, maker->selection, &section->codec,
		       why));
	if (*declared->dictionary && !has_pages(declared))
		return reason_give(why, STATUS_BAD_USAGE,
				   "dictionary: is for pages, and layouts has "
				   "none; write layouts = whole 4K, say");
	TRY(read_list("containers", declared->containers, &section->containers,
		      why));
	TRY(read_list("options", declared->options, &section->options, why));
	return read_list("dictionary", declared->dictionary,
			 &section->dictionaries, why);
}

/* Two spellings of one setting would be one row of the ledger. */
static bool is_there(const struct plan *plan, const struct plan_cell *cell)
{
	for (size_t i = 0; i < plan->cell_count; i++) {
		const struct plan_cell *other = &plan->cells[i];

		if (other->codec == cell->codec &&
		    other->page_bytes == cell->page_bytes &&
		    strcmp(other->setting.text, cell->setting.text) == 0)
			return true;
	}
	return false;
}

static MUST_USE enum status add_cell(struct cell_maker *maker,
				     const char *level,
				     const struct codec_setting *setting,
				     const char *layout)
{
	const struct section *section = &maker->section;
	const struct selection *selection = maker->selection;
	struct plan *plan = maker->plan;
	struct plan_cell cell = {.codec = section->codec, .setting = *setting};

	TRY(layout_parse(layout, &cell.page_bytes, maker->why));
	if (setting->dictionary_bytes && !cell.page_bytes)
		return STATUS_OK;
	cell.place = maker->place++;
	cell.setting.storage_unit = plan->set->storage_unit;
	if (is_there(plan, &cell))
		return reason_give(maker->why, STATUS_BAD_USAGE,
				   "%s at layout %s is there twice",
				   setting->text, layout);
	if (!names_hold(&selection->codecs, section->declared->name) ||
	    (!names_hold(&selection->levels, level) &&
	     !names_hold(&selection->levels, setting->text)))
		return STATUS_OK;
	TRY(memory_resize(&plan->cells, plan->cell_count + 1,
			  sizeof(*plan->cells)));
	plan->cells[plan->cell_count++] = cell;
	return STATUS_OK;
}

static MUST_USE enum status add_setting(struct cell_maker *maker,
					const struct setting_words *words)
{
	const struct text_list *layouts = &maker->section.declared->layouts;
	struct codec_setting setting;

	TRY(setting_parse(maker->section.codec, words, &setting, maker->why));
	for (size_t i = 0; i < layouts->count; i++)
		TRY(add_cell(maker, words->level, &setting, layouts->texts[i]));
	return STATUS_OK;
}

/* The word of a list that may be empty, which counts as one empty word. */
static const char *word_at(const struct text_list *list, size_t i)
{
	return i < list->count ? list->texts[i] : NULL;
}

static size_t words_of(const struct text_list *list)
{
	return list->count ? list->count : 1;
}

static MUST_USE enum status add_level(struct cell_maker *maker,
				      const char *level)
{
	const struct section *section = &maker->section;
	struct setting_words words = {.level = level};

	for (size_t c = 0; c < words_of(&section->containers); c++) {
		words.container = word_at(&section->containers, c);
		for (size_t o = 0; o < words_of(&section->options); o++) {
			words.options = word_at(&section->options, o);
			words.dictionary = NULL;
			TRY(add_setting(maker, &words));
			for (size_t d = 0; d < section->dictionaries.count;
			     d++) {
				words.dictionary =
					section->dictionaries.texts[d];
				TRY(add_setting(maker, &words));
			}
		}
	}
	return STATUS_OK;
}

static MUST_USE enum status add_section(struct cell_maker *maker,
					const struct set_codec *declared)
{
	enum status status = section_init(maker, declared);

	for (size_t i = 0; status == STATUS_OK && i < declared->levels.count;
	     i++)
		status = add_level(maker, declared->levels.texts[i]);
	if (status == STATUS_OK && !declared->levels.count)
		status = add_level(maker, HOUSE_LEVEL);
	section_release(&maker->section);
	if (status != STATUS_OK)
		reason_prefix(maker->why,
			      "%s:%u: [codec %s]: ", maker->plan->set->path,
			      declared->line, declared->name);
	return status;
}

enum status plan_choose_cells(struct plan *plan,
			      const struct selection *selection,
			      struct reason *why)
{
	const struct set *set = plan->set;
	struct cell_maker maker = {
		.plan = plan, .selection = selection, .why = why};

	for (size_t i = 0; i < set->codec_count; i++)
		TRY(add_section(&maker, &set->codecs[i]));
	if (selection->levels.count && !plan->cell_count)
		return reason_give(why, STATUS_BAD_USAGE,
				   "--level: no chosen codec of the set has "
				   "such a level");
	return STATUS_OK;
}
