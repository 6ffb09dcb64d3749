#include "corpus/corpus.h"

#include "corpus/file_read.h"
#include "corpus/set_path.h"

#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>

static enum status check_digest(const struct set_corpus *entry,
				const struct corpus *corpus, struct reason *why)
{
	if (!*entry->sha256 || strcmp(entry->sha256, corpus->sha256) == 0)
		return STATUS_OK;
	return reason_give(why, STATUS_MISMATCH,
			   "%s: SHA-256 expected %s, found %s; get the file "
			   "again, or, where its new bytes are meant, write "
			   "sha256 = %s",
			   entry->file, entry->sha256, corpus->sha256,
			   corpus->sha256);
}

static enum status add_origin(const struct set_corpus *entry,
			      struct reason *why)
{
	struct reason first;

	if (!why || !*entry->origin)
		return STATUS_NOT_FOUND;
	first = *why;
	return reason_give(why, STATUS_NOT_FOUND, "%s; it comes from: %s",
			   first.text, entry->origin);
}

enum status corpus_open(const struct set_corpus *entry, uint64_t memory_limit,
			struct corpus *corpus, struct reason *why)
{
	const struct read_limit limit = {memory_limit, CORPUS_MEMORY_PER_BYTE};
	struct corpus made = {0};
	enum status status;

	if (entry->within && !path_is_within(entry->file, entry->within))
		return reason_give(why, STATUS_BAD_USAGE,
				   "%s: is a link out of the set's folder %s; "
				   "allow it with --outside",
				   entry->file, entry->within);
	status = file_read(entry->file, &limit, &made.bytes, &made.length, why);
	if (status == STATUS_NOT_FOUND)
		return add_origin(entry, why);
	TRY(status);
	digest_sha256(made.bytes, made.length, made.sha256);
	status = check_digest(entry, &made, why);
	if (status != STATUS_OK) {
		corpus_close(&made);
		return status;
	}
	*corpus = made;
	return STATUS_OK;
}

uint64_t corpus_file_bytes(const struct set_corpus *entry)
{
	struct stat about;

	if (stat(entry->file, &about) != 0 || about.st_size < 0)
		return 0;
	return (uint64_t)about.st_size;
}

void corpus_close(struct corpus *corpus)
{
	memory_free(corpus->bytes);
	*corpus = (struct corpus){0};
}

struct slice corpus_bytes(const struct corpus *corpus)
{
	return (struct slice){corpus->bytes, corpus->length};
}
