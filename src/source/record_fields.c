#include "source/record_fields.h"

#include "source/weights.h"

static double entropy_of_two(uint32_t part, uint32_t whole)
{
	const uint32_t values[2] = {part, whole - part};
	struct weights weights;

	weights_init(&weights, values, 2);
	return weights_entropy(&weights);
}

double two_state_rate(uint32_t alpha, uint32_t beta, uint32_t whole)
{
	return (beta * entropy_of_two(alpha, whole) +
		alpha * entropy_of_two(beta, whole)) /
	       (alpha + beta);
}

uint8_t flips_before_one(struct random_stream *random)
{
	uint32_t count = 0;
	uint32_t word = random_u32(random);

	while (!word && count < 224) {
		count += 32;
		word = random_u32(random);
	}
	return (uint8_t)(count + (word ? (uint32_t)__builtin_ctz(word) : 31));
}

void put_u16le(uint8_t *bytes, uint32_t value)
{
	bytes[0] = (uint8_t)value;
	bytes[1] = (uint8_t)(value >> 8);
}

void put_u32le(uint8_t *bytes, uint32_t value)
{
	put_u16le(bytes, value);
	put_u16le(bytes + 2, value >> 16);
}
