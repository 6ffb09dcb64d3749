#include "estimate/dirichlet_code.h"

#include "estimate/dirichlet_grams.h"
#include "estimate/quick_log.h"

#define NO_GRAM 0    /* number of a gram that would begin too early */
#define EMPTY_GRAM 1 /* number of the gram of no symbols */

/* Symbols that memory is asked for ahead of their turn. */
#define AHEAD 12

/* The gram of the present length that ends at a symbol. */
struct ending {
	uint32_t number, before; /* before: times seen earlier */
};

struct coder {
	const struct dirichlet_input *input;
	struct quick_log *log;
	struct gram_table table;
	struct ending *endings; /* owned; of n symbols, one length shorter to
				   the right of the present symbol */
	struct ending context;  /* what ends just before the present symbol */
	unsigned order;
	uint64_t log_alphabet_q32[ALPHABET_CHOICES];
};

static void coder_release(struct coder *coder)
{
	memory_free(coder->log);
	memory_free(coder->endings);
	gram_table_release(&coder->table);
}

static MUST_USE enum status coder_init(struct coder *coder,
				       const struct dirichlet_input *input)
{
	if (input->sequence->n > UINT32_MAX - 2)
		return STATUS_NO_MEMORY;
	coder->input = input;
	TRY(quick_log_new(&coder->log));
	TRY(gram_table_init(&coder->table));
	TRY(memory_new_zeroed(input->sequence->n, sizeof(*coder->endings),
			      &coder->endings));
	for (unsigned a = 0; a < ALPHABET_CHOICES; a++)
		coder->log_alphabet_q32[a] =
			quick_log_q32(coder->log, input->alphabet[a]);
	return STATUS_OK;
}

static inline uint32_t code_at(const struct sequence *sequence, size_t t)
{
	const uint8_t *code = sequence->codes + t * sequence->code_width;
	uint32_t value = code[0];

	for (unsigned i = 1; i < sequence->code_width; i++)
		value = value << 8 | code[i];
	return value;
}

/*
 * The slot to be asked for when it is the turn of symbol t. The prefetch stands
 * in the caller, as gcc drops calls of functions that do nothing else.
 */
static inline const uint32_t *slot_ahead(const struct coder *coder, size_t t,
					 size_t to)
{
	size_t ahead = t + AHEAD < to ? t + AHEAD : t;
	uint32_t shorter = EMPTY_GRAM;

	if (coder->order && ahead > 0)
		shorter = coder->endings[ahead - 1].number;
	return &coder->table.slots[gram_slot(
		&coder->table, shorter,
		code_at(coder->input->sequence, ahead))];
}

/*
 * Symbols from … to-1, all of one page and block. As every gram was counted on
 * arrival, "seen earlier" of a context is how often a symbol followed it.
 */
static MUST_USE enum status code_span(struct coder *coder, size_t from,
				      size_t to, int64_t *sum_q32)
{
	const struct sequence *sequence = coder->input->sequence;
	const uint64_t *alphabet = coder->input->alphabet;
	struct ending context = coder->context, *endings = coder->endings;

	for (size_t t = from; t < to; t++) {
		struct ending longer = {NO_GRAM, 0};
		uint64_t seen_q32 =
			quick_log_q32(coder->log, (uint64_t)context.before + 1);

		__builtin_prefetch(slot_ahead(coder, t, to), 1);
		if (context.number != NO_GRAM) {
			if (coder->table.next == coder->table.limit)
				TRY(gram_table_grow(&coder->table));
			longer.number = gram_count(
				&coder->table, context.number,
				code_at(sequence, t), &longer.before);
		}
		for (unsigned a = 0; a < ALPHABET_CHOICES; a++)
			sum_q32[a] +=
				(int64_t)(coder->log_alphabet_q32[a] +
					  seen_q32 -
					  quick_log_q32(
						  coder->log,
						  alphabet[a] * longer.before +
							  1));
		if (coder->order)
			context = endings[t];
		else
			context.before++;
		endings[t] = longer;
	}
	coder->context = context;
	return STATUS_OK;
}

static void begin_page(struct coder *coder)
{
	gram_table_restart(&coder->table);
	coder->context =
		(struct ending){coder->order ? NO_GRAM : EMPTY_GRAM, 0};
}

/* The first symbol that begins at a byte or after it. */
static size_t symbol_from_byte(const struct sequence *sequence, size_t byte)
{
	size_t low = 0, high = sequence->n;

	while (low < high) {
		size_t middle = low + (high - low) / 2;

		if (sequence_byte_of(sequence, middle) < byte)
			low = middle + 1;
		else
			high = middle;
	}
	return low;
}

/* The first symbol of the page after that of symbol t; n is the end. */
static size_t page_end(const struct dirichlet_input *input, size_t t)
{
	const struct sequence *sequence = input->sequence;
	size_t page = input->page_bytes, byte;

	if (!page)
		return sequence->n;
	byte = sequence_byte_of(sequence, t) / page;
	if (byte >= SIZE_MAX / page)
		return sequence->n;
	return symbol_from_byte(sequence, (byte + 1) * page);
}

/* One order, span by span; a span ends with its page and with its block. */
static MUST_USE enum status code_order(struct coder *coder,
				       struct dirichlet_sums *sums)
{
	const struct dirichlet_input *input = coder->input;
	size_t n = input->sequence->n, block = 0, end;
	size_t page = 0; /* where the next one begins */

	for (size_t t = 0; t < n; t = end) {
		int64_t sum[ALPHABET_CHOICES] = {0};

		if (t == page) {
			begin_page(coder);
			page = page_end(input, t);
		}
		end = page;
		if (sums->blocks && input->cuts->symbol[block + 1] < end)
			end = input->cuts->symbol[block + 1];
		/* the sum of so many symbols stays far within 63 bits */
		if (end - t > (size_t)1 << 24)
			end = t + ((size_t)1 << 24);
		TRY(code_span(coder, t, end, sum));
		for (unsigned a = 0; a < ALPHABET_CHOICES; a++) {
			sums->total_q32[coder->order][a] += sum[a];
			if (sums->blocks)
				dirichlet_blocks(sums, coder->order,
						 a)[block] += sum[a];
		}
		if (sums->blocks && end == input->cuts->symbol[block + 1])
			block++;
	}
	return STATUS_OK;
}

static MUST_USE enum status code_orders(struct coder *coder,
					struct dirichlet_sums *sums)
{
	for (unsigned order = 0; order < DIRICHLET_ORDERS; order++) {
		coder->order = order;
		gram_table_renew(&coder->table);
		TRY(code_order(coder, sums));
	}
	return STATUS_OK;
}

enum status dirichlet_code(const struct dirichlet_input *input,
			   struct dirichlet_sums *sums)
{
	struct dirichlet_sums made = {.blocks = input->cuts->blocks};
	struct coder coder = {0};
	enum status status;

	if (made.blocks)
		TRY(memory_new_zeroed(
			made.blocks * DIRICHLET_ORDERS * ALPHABET_CHOICES,
			sizeof(*made.block_q32), &made.block_q32));
	status = coder_init(&coder, input);
	if (status == STATUS_OK)
		status = code_orders(&coder, &made);
	coder_release(&coder);
	if (status == STATUS_OK)
		*sums = made;
	else
		dirichlet_sums_release(&made);
	return status;
}

void dirichlet_sums_release(struct dirichlet_sums *sums)
{
	memory_free(sums->block_q32);
	*sums = (struct dirichlet_sums){0};
}

int64_t *dirichlet_blocks(const struct dirichlet_sums *sums, unsigned order,
			  enum dirichlet_alphabet alphabet)
{
	return sums->block_q32 +
	       (order * ALPHABET_CHOICES + alphabet) * sums->blocks;
}

enum status subset_bits_q32(uint64_t alphabet, uint64_t seen,
			    wide_int *bits_q32)
{
	uint64_t chosen = seen < alphabet - seen ? seen : alphabet - seen;
	struct quick_log *log;
	wide_int sum = 0;

	TRY(quick_log_new(&log));
	for (uint64_t i = 0; i < chosen; i++)
		sum += (wide_int)quick_log_q32(log, alphabet - i) -
		       (wide_int)quick_log_q32(log, i + 1);
	memory_free(log);
	*bits_q32 = sum;
	return STATUS_OK;
}
