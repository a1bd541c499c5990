/* digest.h - SHA-256 of what goes in, so that a table can name it */
#ifndef RG_BASE_DIGEST_H
#define RG_BASE_DIGEST_H
#include <roadglint/status.h>
#include <stddef.h>

typedef struct rg_digest rg_digest;

/* NULL without memory. */
rg_digest *rg_digest_new(void);
void rg_digest_add(rg_digest *digest, const void *bytes, size_t n);
/* Writes 64 hex digits and a 0, and frees the digest. */
void rg_digest_end(rg_digest *digest, char hex[65]);

#endif
