#include "cli/commands.h"

const struct command *const commands[] = {
	&command_survey,  &command_report,    &command_gate,
	&command_corpora, &command_synth,     &command_merge,
	&command_methods, &command_calibrate, NULL,
};
