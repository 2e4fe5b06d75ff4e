/* claims.h: cmocka with the headers that it needs before it. */
#ifndef SUPPORT_CLAIMS_H
#define SUPPORT_CLAIMS_H

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

#endif
