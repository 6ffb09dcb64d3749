/* The rows of the command table, each at the end of its own file. */
#ifndef CLI_COMMANDS_H
#define CLI_COMMANDS_H

#include "cli/command.h"

extern const struct command command_survey;
extern const struct command command_report;
extern const struct command command_gate;
extern const struct command command_corpora;
extern const struct command command_synth;
extern const struct command command_merge;
extern const struct command command_methods;
extern const struct command command_calibrate;

#endif
