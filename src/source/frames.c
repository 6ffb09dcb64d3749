/* Gauge frames of Marrow Bay: packed records as telemetry links carry them. */
#include "source/bytestream.h"
#include "source/record_fields.h"
#include "source/source_rows.h"
#include "source/walk.h"

/*
 * A frame, little-endian, and the bits that each field is worth. Fields are
 * independent of each other, and each step of what it was before, so that the
 * entropy of a frame given the past is the sum of the steps' entropies.
 *
 *  0 u8  sync byte                                      0
 *  1 u8  station                                        0
 *  2 u16 frame number, one more each                    0
 *  4 u32 clock in ms: 1000 on, and a jitter             H(jitter)
 *  8 u32 water passed in litres: 2 dice of 14 on        H(dice)
 * 12 u32 barometer in tenths of Pa, a walk              H(step)
 * 16 u16 level in mm, a walk                            H(step)
 * 18 u16 temperature in mK, a walk                      H(step)
 * 20 u16 salinity in mg/kg, a walk                      H(step)
 * 22 u16 turbidity in units of .01 NTU, a walk          H(step)
 * 24 u32 charge left in mAs: one less in 3 of 8 frames  h(3/8)
 * 28 u8  quality flag, a two-state chain (.01, .1)      its rate
 * 29 u8  bubbles seen: fair flips before a head         2
 * 30 u16 wave strain, 2 dice of 64 about a mean         H(dice)
 *
 * bits per byte = sum / 32. Charge and flag go by their own integer weights;
 * wrapping round at 2^16 or 2^32 keeps every step apart and costs nothing.
 */
enum { FRAME_BYTES = 32, WALKS = 5, CHARGE_DROPS = 3, CHARGE_OUT_OF = 8 };

enum walks { BAROMETER, LEVEL, TEMPERATURE, SALINITY, TURBIDITY };

struct frame_model {
	struct weights jitter, litres, charge, strain;
	struct walk walks[WALKS];
};

struct frame_state {
	uint32_t number, clock_ms, litres, charge;
	int64_t readings[WALKS];
	uint8_t flag;
};

static void model_init(struct frame_model *model)
{
	static const uint32_t jitter[5] = {1, 4, 22, 4, 1};
	static const uint32_t charge[2] = {CHARGE_OUT_OF - CHARGE_DROPS,
					   CHARGE_DROPS};

	weights_init(&model->jitter, jitter, 5);
	weights_init(&model->charge, charge, 2);
	weights_init_dice(&model->litres, 14);
	weights_init_dice(&model->strain, 64);
	walk_init(&model->walks[BAROMETER], 1013250, 40, 64);
	walk_init(&model->walks[LEVEL], 2816, 7, 20);
	walk_init(&model->walks[TEMPERATURE], 11520, 4, 12);
	walk_init(&model->walks[SALINITY], 24320, 3, 8);
	walk_init(&model->walks[TURBIDITY], 1280, 10, 48);
}

static double frames_rate(void)
{
	struct frame_model model;
	double bits;

	model_init(&model);
	bits = weights_entropy(&model.jitter) + weights_entropy(&model.litres) +
	       weights_entropy(&model.charge) + two_state_rate(1, 10, 100) + 2 +
	       weights_entropy(&model.strain);
	for (unsigned i = 0; i < WALKS; i++)
		bits += weights_entropy(&model.walks[i].step);
	return bits / FRAME_BYTES;
}

static void state_init(struct frame_state *state,
		       const struct frame_model *model,
		       struct random_stream *random)
{
	*state = (struct frame_state){
		.clock_ms = 86400000,
		.litres = 730512000,
		.charge = 412300000,
		.flag = random_below(random, 11) < 1,
	};
	for (unsigned i = 0; i < WALKS; i++)
		state->readings[i] = model->walks[i].centre;
}

static void state_step(struct frame_state *state,
		       const struct frame_model *model,
		       struct random_stream *random)
{
	state->number++;
	state->clock_ms += 998 + weights_draw(&model->jitter, random);
	state->litres += weights_draw(&model->litres, random);
	state->charge -= weights_draw(&model->charge, random);
	if (random_below(random, 100) < (state->flag ? 10U : 1U))
		state->flag = !state->flag;
	for (unsigned i = 0; i < WALKS; i++)
		state->readings[i] =
			walk_next(&model->walks[i], state->readings[i], random);
}

static void frame_pack(uint8_t frame[FRAME_BYTES],
		       const struct frame_state *state, uint8_t bubbles,
		       uint32_t strain)
{
	frame[0] = 0xb7;
	frame[1] = 0x14;
	put_u16le(frame + 2, state->number);
	put_u32le(frame + 4, state->clock_ms);
	put_u32le(frame + 8, state->litres);
	put_u32le(frame + 12, (uint32_t)state->readings[BAROMETER]);
	put_u16le(frame + 16, (uint32_t)state->readings[LEVEL]);
	put_u16le(frame + 18, (uint32_t)state->readings[TEMPERATURE]);
	put_u16le(frame + 20, (uint32_t)state->readings[SALINITY]);
	put_u16le(frame + 22, (uint32_t)state->readings[TURBIDITY]);
	put_u32le(frame + 24, state->charge);
	frame[28] = state->flag;
	frame[29] = bubbles;
	put_u16le(frame + 30, 960 + strain);
}

static void frames_generate(struct source_stream *stream, uint64_t seed)
{
	struct random_stream random;
	struct frame_model model;
	struct frame_state state;

	model_init(&model);
	random_init(&random, seed, random_name("gauge-frames"));
	state_init(&state, &model, &random);
	while (!stream_full(stream)) {
		uint8_t frame[FRAME_BYTES];
		uint8_t bubbles = flips_before_one(&random);

		frame_pack(frame, &state, bubbles,
			   weights_draw(&model.strain, &random));
		stream_put(stream, frame, sizeof(frame));
		state_step(&state, &model, &random);
	}
}

const struct source source_frames = {
	.name = "gauge-frames",
	.summary = "packed frames of a tide gauge: counters, walks, flags",
	.publication = "sum of the fields' rates, Cover and Thomas 2006, 4.2",
	.symbols = "byte",
	.records = "32",
	.default_symbols = 1 << 22,
	.rate_exact = true,
	.bits_per_symbol = frames_rate,
	.generate = frames_generate,
};
