#include "codec/codec.h"

#include "codec/house.h"
#include "codec/page_dictionaries.h"

/* One encode and decode of one page or of the whole. */
struct timed_piece {
	const struct codec *codec;
	const struct codec_setting *setting;
	const struct cell_clock *clock;
	size_t page_bytes;
	struct page_dictionaries dictionaries;
	struct buffer packed, plain;
	struct house_session *session;
};

/* One call of a row: what the clock saw, or what was seen elsewhere. */
static MUST_USE enum status
time_call(struct timed_piece *piece,
	  enum status (*call)(const struct codec_job *job, struct buffer *out,
			      struct reason *why),
	  struct codec_job *job, struct buffer *out, struct child_usage *took,
	  struct reason *why)
{
	double cpu = piece->clock->cpu_seconds();
	double wall = piece->clock->wall_seconds();

	job->session = piece->session;
	job->usage = took;
	out->length = 0;
	TRY(call(job, out, why));
	if (piece->codec->house)
		return STATUS_OK;
	took->cpu_seconds = piece->clock->cpu_seconds() - cpu;
	took->wall_seconds = piece->clock->wall_seconds() - wall;
	return STATUS_OK;
}

static uint64_t larger(uint64_t a, uint64_t b)
{
	return a > b ? a : b;
}

static void add_round(struct cell_round *round,
		      const struct child_usage *encode,
		      const struct child_usage *decode)
{
	round->encode_cpu += encode->cpu_seconds;
	round->encode_wall += encode->wall_seconds;
	round->decode_cpu += decode->cpu_seconds;
	round->decode_wall += decode->wall_seconds;
	round->encode_peak_bytes =
		larger(round->encode_peak_bytes, encode->peak_bytes);
	round->decode_peak_bytes =
		larger(round->decode_peak_bytes, decode->peak_bytes);
}

static MUST_USE enum status time_piece(struct timed_piece *piece,
				       struct slice input, size_t start,
				       struct cell_round *round,
				       struct reason *why)
{
	struct codec_job job = {
		.setting = piece->setting,
		.input = input,
		.page_bytes = piece->page_bytes,
		.dictionary = page_dictionary(&piece->dictionaries, start,
					      piece->page_bytes)};
	struct child_usage encode = {0, 0, 0}, decode = {0, 0, 0};

	TRY(time_call(piece, piece->codec->encode, &job, &piece->packed,
		      &encode, why));
	piece->plain.limit = input.length + 1;
	job.input = (struct slice){piece->packed.bytes, piece->packed.length};
	TRY(time_call(piece, piece->codec->decode, &job, &piece->plain, &decode,
		      why));
	add_round(round, &encode, &decode);
	return STATUS_OK;
}

enum status cell_time(const struct codec *codec,
		      const struct codec_setting *setting, size_t page_bytes,
		      struct slice input, const struct cell_clock *clock,
		      struct cell_round *round, struct reason *why)
{
	struct timed_piece piece = {.codec = codec,
				    .setting = setting,
				    .clock = clock,
				    .page_bytes = page_bytes};
	struct cell_round sum = {0};
	size_t step = page_bytes ? page_bytes : input.length, start = 0;
	enum status status;

	/* Trained and made ready once, as whoever ships them does. */
	TRY(page_dictionaries_init(&piece.dictionaries, codec, setting, input,
				   page_bytes, why));
	status = house_open(codec->house, setting,
			    step ? (input.length + step - 1) / step : 1,
			    &piece.session, why);
	buffer_init(&piece.packed, SIZE_MAX / 2);
	buffer_init(&piece.plain, SIZE_MAX / 2);
	/* The pages of the heap are touched before the clock starts. */
	if (status == STATUS_OK &&
	    (buffer_reserve(&piece.packed, step + step / 8 + 1024) !=
		     STATUS_OK ||
	     buffer_reserve(&piece.plain, step + 1) != STATUS_OK))
		status = reason_give(why, STATUS_NO_MEMORY, "out of memory");
	while (status == STATUS_OK && start < input.length) {
		size_t length = input.length - start;
		struct slice page = {input.bytes + start, 0};

		page.length = length < step ? length : step;
		status = time_piece(&piece, page, start, &sum, why);
		start += page.length;
	}
	buffer_release(&piece.packed);
	buffer_release(&piece.plain);
	page_dictionaries_release(&piece.dictionaries);
	house_close(piece.session);
	if (status == STATUS_OK)
		*round = sum;
	return status;
}
