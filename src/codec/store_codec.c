#include "codec/codec_rows.h"

static MUST_USE enum status
store_parse(const char *text, struct codec_setting *setting, struct reason *why)
{
	return level_number(text, 0, 0, "store", setting, why);
}

static MUST_USE enum status store_copy(const struct codec_job *job,
				       struct buffer *out, struct reason *why)
{
	if (buffer_add(out, job->input.bytes, job->input.length) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	return STATUS_OK;
}

static MUST_USE enum status store_encode(const struct codec_job *job,
					 struct buffer *out, struct reason *why)
{
	size_t start = 0;

	TRY(store_copy(job, out, why));
	for (size_t i = 0; job->piece_bytes && i < job_pieces(job); i++) {
		job->piece_bytes[i] = job_piece_end(job, i) - start;
		start = job_piece_end(job, i);
	}
	return STATUS_OK;
}

static enum status store_framing(const struct codec_setting *setting,
				 struct slice stream, uint64_t *bytes)
{
	(void)setting;
	(void)stream;
	*bytes = 0;
	return STATUS_OK;
}

const struct codec codec_store = {
	.name = "store",
	.summary = "copies: the baseline, 8 bits a byte",
	.source = "no format",
	.levels = "0",
	.flushes = true,
	.work = 0.002,
	.parse = store_parse,
	.encode = store_encode,
	.decode = store_copy,
	.framing = store_framing,
};
