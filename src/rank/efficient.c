/* efficient.c: rows that no other beats in every respect.
**
** A row beats another when it is at least as good in margin, loss, peak temperature and price, and
** better in one. Only parts that pass take part. A price that is not stated beats none that is. */
#include "base/number.h"

#include <passfet/ranking.h>

/* -1 worse, 0 equal, 1 better; smaller is better. */
static int compare(double left, double right)
{
    return left < right ? 1 : left > right ? -1 : 0;
}

static bool beats(const pf_row *strong, const pf_row *weak)
{
    const int by[] = {
        compare(weak->soa_margin, strong->soa_margin),
        compare(strong->conduction_loss_W, weak->conduction_loss_W),
        compare(strong->peak_junction_degC, weak->peak_junction_degC),
        compare(strong->price, weak->price),
    };
    bool better = false;
    if (pf_is_stated(weak->price) && !pf_is_stated(strong->price)) return false;
    for (size_t i = 0; i < sizeof by / sizeof *by; i++) {
        if (by[i] < 0) return false;
        better |= by[i] > 0;
    }
    return better;
}

bool pf_row_is_unbeaten(const pf_ranking *ranking, size_t place)
{
    const pf_row *row = &ranking->row[place];
    if (row->verdict != PF_PASS) return false;
    for (size_t i = 0; i < ranking->count; i++)
        if (ranking->row[i].verdict == PF_PASS && beats(&ranking->row[i], row)) return false;
    return true;
}
