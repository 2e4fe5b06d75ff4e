/* fuzz_number.c: any text as a number of any quantity, in any style. What is read must be finite, in
** the column's range, and read the same a second time from the value printed. */
#include "base/number.h"
#include "intake/value.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>

static pf_value_rule rule_of(const uint8_t *data)
{
    return (pf_value_rule){.quantity = (pf_quantity)(data[0] % PF_QUANTITY_COUNT),
                           .factor = data[1] & 1 ? 1e-3 : 0,
                           .lowest = data[1] & 2 ? -1e6 : 1e-9,
                           .highest = 1e6,
                           .signless = data[1] & 4,
                           .plus_minus = data[1] & 8,
                           .range_upper = data[1] & 16,
                           .bound = (pf_bound)(data[1] >> 5 & 1)};
}

static void check_number(const char *text, size_t length)
{
    char printed[PF_NUMBER_ROOM];
    double value, again;
    size_t taken = pf_number_read(text, length, &value);
    if (taken == 0) return;
    if (taken > length || !isfinite(value)) abort();
    size_t size = pf_number_print(printed, value, 0);
    if (pf_number_read(printed, size, &again) != size || again != value) abort();
}

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size);

int LLVMFuzzerTestOneInput(const uint8_t *data, size_t size)
{
    static const char decimals[] = {0, '.', ','}, delimiters[] = {',', ';', '\t'};
    if (size < 4) return 0;
    pf_value_rule rule = rule_of(data);
    pf_number_style style = {decimals[data[2] % 3], delimiters[data[2] / 3 % 3], 0};
    const char *text = (const char *)data + 3;
    pf_fault fault;
    pf_value value;
    if (memchr(text, 0, size - 3)) return 0;
    check_number(text, size - 3);
    pf_status status = pf_value_read((pf_slice){text, size - 3}, &rule, &style, &value, &fault);
    if (status == PF_BAD_INPUT && !fault.wrong[0]) abort();
    if (status != PF_OK || !pf_is_stated(value.value)) return 0;
    if (!(value.value >= rule.lowest && value.value <= rule.highest)) abort();
    return 0;
}
