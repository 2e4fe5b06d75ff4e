/* passfet.h: the whole library in one include.
**
** Layers, each of which uses those above it only:
**
**     error, units, problem        statuses, texts of errors, quantities
**     part, change, plausibility   what a data sheet states
**     profile, stress              what a card does to a part
**     ranking, headroom, explain, sensitivity   verdicts, order, and why
**     intake                       CSV to parts, profiles, captures
**     store                        the ratings database
**     report, listing, review, page   results as text, CSV, JSON, HTML
**
** SI units throughout and temperatures in degC; the unit of a double is the last word of its name. A
** number that is not stated or cannot be worked out is NaN. No function reads a clock, a locale or the
** environment, keeps a global, prints to a stream that it was not handed, or ends the process.
*/
#ifndef PASSFET_PASSFET_H
#define PASSFET_PASSFET_H

#include <passfet/change.h>
#include <passfet/error.h>
#include <passfet/explain.h>
#include <passfet/headroom.h>
#include <passfet/intake.h>
#include <passfet/listing.h>
#include <passfet/page.h>
#include <passfet/part.h>
#include <passfet/plausibility.h>
#include <passfet/problem.h>
#include <passfet/profile.h>
#include <passfet/ranking.h>
#include <passfet/report.h>
#include <passfet/review.h>
#include <passfet/sensitivity.h>
#include <passfet/store.h>
#include <passfet/stress.h>
#include <passfet/units.h>

#endif
