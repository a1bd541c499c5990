/* digest.c - SHA-256 by OpenSSL's libcrypto */
#include "base/digest.h"
#include <openssl/evp.h>
#include <stdio.h>
#include <string.h>

rg_digest *rg_digest_new(void)
{
    EVP_MD_CTX *context = EVP_MD_CTX_new();
    if (context && EVP_DigestInit_ex(context, EVP_sha256(), NULL) != 1) {
        EVP_MD_CTX_free(context);
        context = NULL;
    }
    return (rg_digest *)context;
}

void rg_digest_add(rg_digest *digest, const void *bytes, size_t n) { EVP_DigestUpdate((EVP_MD_CTX *)digest, bytes, n); }

void rg_digest_end(rg_digest *digest, char hex[65])
{
    unsigned char sum[32];
    EVP_DigestFinal_ex((EVP_MD_CTX *)digest, sum, NULL);
    EVP_MD_CTX_free((EVP_MD_CTX *)digest);
    for (size_t i = 0; i < sizeof sum; i++) snprintf(hex + 2 * i, 3, "%02x", sum[i]);
}
