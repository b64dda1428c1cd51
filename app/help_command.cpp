// SPDX-License-Identifier: GPL-3.0-or-later
#include "app/commands.h"

namespace sinewright::app {

namespace {

constexpr const char* kProgramHelp =
    R"(Sinewright: a bench companion for people who trim sine oscillators.

  sinewright [--source SOURCE] [--rate HZ] [--channel N]
        Opens the window. Without --source it shows what it showed last time,
        the first time the demo oscillator.
  sinewright measure SOURCE [options]
        Makes one full reading and prints it; see 'sinewright measure --help'.
  sinewright cards [--json]
        Lists the audio interfaces and what they can do.
  sinewright --picture FILE [options]
        Lets the same window run off screen for a while, saves what it shows as
        a PNG and prints the reading. Needs no display and leaves your settings
        alone.

SOURCE is one of
  demo               a computed lamp-stabilised oscillator with a trimmer
  card               the default input of the audio interface
  card:NAME          another input by its name or a part of it
  card:HOST::NAME    the same, only among the inputs of one host API
  FILE               a WAV, FLAC, AIFF or CAF file (./demo for one called demo)

Options
  --rate HZ          sample rate; a card's own unless given, 96000 for the demo
  --channel N        channel, counted from 1 (default 1)
  --help             this text; after a command, the help of that command
  --version          the version

With --picture
  --after S          how much signal to show, in seconds (default 8)
  --size WxH         size of the window (default 1280x800); a caption is set
                     below it
  --scale 1|2        pixels per point of the picture (default 1)
  --theme paper|dusk
  --page hook-up|trim|warm-up|network|record   (default trim)
  --trimmer OHM,...  demo: stops of the trimmer, gone through evenly, 226 to 480
  --report-load      also print how much of one processor core it took

Exit status
  0  the reading is good
  1  there is a reading but it is unusable, or samples were lost all the time
  2  wrong usage
  3  the source cannot be opened or read, or has not what was asked for
  4  a result cannot be written

Valve and mains-powered builds hold lethal voltages. Never join the input of an
interface to a circuit that is not isolated from the mains; check for DC and
high voltage first, and put a capacitor and an attenuator in between.
)";

constexpr const char* kMeasureHelp = R"(Makes one full reading of a source and prints it.

  sinewright measure SOURCE [options]

SOURCE is 'demo', 'card', 'card:NAME', 'card:HOST::NAME' or a file; see
'sinewright --help'.

Options
  --json             one JSON object (schema sinewright.reading/1), no
                     table; a figure that cannot be had is null
  --channel N        channel, counted from 1 (default 1)
  --rate HZ          card and demo: sample rate (default: the card's own; 96000)
  --start S          take: where to begin, in seconds (default 0)
  --seconds S        how much to measure. Default: of a take all behind the
                     start, 60 s at the most; of card and demo 4 s. Ask for more
                     if you like: up to 16777216 samples, 174 s at 96 kHz.
  --band LO:HI       measuring band in Hz (default 20:20000); the upper edge is
                     limited to half the sample rate
  --harmonics K      highest harmonic that counts, 2 to 32 (default 10)
  --weighting none|a|468
                     weighting of noise and residual (default none): A after
                     IEC 61672-1, or ITU-R BS.468 with an rms detector
  --full-scale V     volts rms of a sine that just fills the scale; levels are
                     then given in volts too
  --trimmer OHM      demo: where the trimmer stands, 226 to 480 (default 355)

Exit status
  0  the reading is good
  1  it is not: no tone, too short, overload; or samples of the card were lost
     in every try
  2  wrong usage: a wrong word, or one that does not go with this source
  3  the source cannot be opened or read, or has not the channel or the start
     that was asked for
  4  the reading cannot be written to standard output

Example
  sinewright measure take.wav --channel 2 --band 20:80000 --full-scale 4
)";

constexpr const char* kCardsHelp =
    R"(Lists the audio interfaces with an input: host API, name, inputs, the rate they
run at by default and the rates they accept.

  sinewright cards [--json]

Options
  --json             one JSON object instead of the table

Any part of a name that no other input shares will do after 'card:', as in
  sinewright --source card:usb --rate 96000

Exit status: 0; 3 when the sound system of this machine cannot be reached.
)";

} // namespace

Outcome runHelp(const HelpRequest& request)
{
    switch (request.topic) {
    case HelpRequest::Topic::Measure:
        return Outcome{.output = kMeasureHelp};
    case HelpRequest::Topic::Cards:
        return Outcome{.output = kCardsHelp};
    case HelpRequest::Topic::Program:
        break;
    }
    return Outcome{.output = kProgramHelp};
}

Outcome runVersion()
{
    return Outcome{.output = "sinewright " SINEWRIGHT_VERSION "\n"};
}

} // namespace sinewright::app
