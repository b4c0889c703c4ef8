/*
 * truth: escape data of single samples by direct iteration at full precision.
 *
 *     cc -O2 -o truth truth.c -lmpfr -lgmp -lm -lpthread
 *     ./truth [-t threads] [-x extra bits] < NAME.json > NAME.new
 *
 * Reads the head of a truth file (set, view, iteration, lattice) from standard input and writes the whole file, head and
 * samples, to standard output.  Samples already present in the input are ignored, so a finished file is its own input and
 * a second run must give the same bytes.  See README.md beside this file.
 *
 * Nothing here is shared with the renderer and nothing is clever: no reference orbit, no perturbation, no table, no
 * shortcut for the inside.  Every sample is a point of the plane known exactly as a rational number, rounded once to the
 * working precision, and iterated with every operation rounded at that precision.
 *
 *     mandelbrot   z(0) = 0,      z(k+1) = z(k)^p + c,          c = the sample
 *     julia        z(0) = sample, z(k+1) = z(k)^p + parameter
 *
 * The sample of pixel (x, y), with (0, 0) top left and the imaginary axis upwards, in a lattice of W by H square pixels:
 *
 *     centre + ((x + 1/2 - W/2) + i (H/2 - y - 1/2)) * height / H
 *
 * n         first index with |z(n)| > bailout, index 0 included; -1 when none is found up to and including the limit
 * mu        n + 1 - log_p(ln|z(n)| / ln bailout)
 * distance  |z| ln|z| / |z'|, in pixels; z' is the derivative by c (mandelbrot) or by z(0) (julia)
 * robust    n stays the same when the sample moves by 1e-8 pixel left, right, up and down
 */
#include <ctype.h>
#include <math.h>
#include <mpfr.h>
#include <pthread.h>
#include <stdarg.h>
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define RN MPFR_RNDN
#define GUARD 64             /* bits beyond those that tell two pixels apart */
#define DERIVATIVE_BITS 128  /* a derivative needs relative precision only; the exponent range of MPFR does the rest */
#define SHIFT_PARTS 100000000L /* a robust count survives a shift of one part in this many of a pixel */

static void fail(const char *format, ...)
{
    va_list args;
    va_start(args, format);
    fputs("truth: ", stderr);
    vfprintf(stderr, format, args);
    fputc('\n', stderr);
    va_end(args);
    exit(1);
}

/* ------------------------------------------------------------------ the head of a truth file */

typedef struct {
    char *name, *origin, *kind, *re, *im, *height, *parameter_re, *parameter_im;
    long power, limit, bailout, width_px, height_px, samples, seed;
    int julia;
} view_t;

static char *read_all(FILE *in)
{
    size_t used = 0, room = 1 << 16, got;
    char *text = malloc(room);
    while (text && (got = fread(text + used, 1, room - used - 1, in)) > 0) {
        used += got;
        if (room - used < 2)
            text = realloc(text, room *= 2);
    }
    if (!text)
        fail("out of memory");
    text[used] = 0;
    return text;
}

/* The text behind "key": at or after `from`, or NULL.  The heads are written by hand in a fixed order, so looking for the
 * key behind its parent is all the parsing that is needed. */
static const char *behind(const char *from, const char *key)
{
    char quoted[64];
    snprintf(quoted, sizeof quoted, "\"%s\":", key);
    const char *at = from ? strstr(from, quoted) : NULL;
    if (!at)
        return NULL;
    at += strlen(quoted);
    while (isspace((unsigned char)*at))
        at++;
    return at;
}

static char *text_of(const char *from, const char *key)
{
    const char *at = behind(from, key), *end;
    if (!at || *at != '"' || !(end = strchr(at + 1, '"')))
        fail("no string \"%s\" in the head", key);
    return strndup(at + 1, (size_t)(end - at - 1));
}

static long number_of(const char *from, const char *key, long least)
{
    const char *at = behind(from, key);
    char *end;
    long value = at ? strtol(at, &end, 10) : 0;
    if (!at || end == at || value < least)
        fail("\"%s\" must be a whole number of at least %ld", key, least);
    return value;
}

static view_t read_view(const char *text)
{
    view_t v = {0};
    const char *set = behind(text, "set"), *view = behind(text, "view");
    const char *iteration = behind(text, "iteration"), *lattice = behind(text, "lattice");
    v.name = text_of(text, "name");
    v.origin = text_of(text, "origin");
    v.kind = text_of(set, "kind");
    v.power = number_of(set, "power", 2);
    v.julia = !strcmp(v.kind, "julia");
    if (v.power > 3 || (!v.julia && strcmp(v.kind, "mandelbrot")))
        fail("the set must be mandelbrot or julia of power 2 or 3");
    if (v.julia) {
        v.parameter_re = text_of(behind(set, "parameter"), "re");
        v.parameter_im = text_of(behind(set, "parameter"), "im");
    }
    v.re = text_of(behind(view, "centre"), "re");
    v.im = text_of(behind(view, "centre"), "im");
    v.height = text_of(view, "height");
    v.limit = number_of(iteration, "limit", 1);
    v.bailout = number_of(iteration, "bailout", 2);
    v.width_px = number_of(lattice, "width", 1);
    v.height_px = number_of(lattice, "height", 1);
    v.samples = number_of(lattice, "samples", 1);
    v.seed = number_of(lattice, "seed", 0);
    return v;
}

static void set_decimal(mpfr_t x, const char *text)
{
    char *end;
    mpfr_strtofr(x, text, &end, 10, RN);
    if (*end || end == text)
        fail("not a decimal number: %.40s", text);
}

/* ------------------------------------------------------------------ one orbit */

/* Everything an orbit needs, allocated once a thread.  z, c, and the t's have the working precision; w (z rounded), d (the
 * derivative) and the u's have DERIVATIVE_BITS. */
typedef struct {
    mpfr_t zr, zi, cr, ci, t1, t2, t3, t4, pixel, bailout2;
    mpfr_t wr, wi, dr, di, u1, u2, u3, u4;
} orbit_t;

typedef struct {
    long x, y, n;
    double mu, distance;
    int robust;
} sample_t;

static void orbit_init(orbit_t *o, const view_t *v, mpfr_prec_t bits)
{
    mpfr_inits2(bits, o->zr, o->zi, o->cr, o->ci, o->t1, o->t2, o->t3, o->t4, o->pixel, o->bailout2, (mpfr_ptr)0);
    mpfr_inits2(DERIVATIVE_BITS, o->wr, o->wi, o->dr, o->di, o->u1, o->u2, o->u3, o->u4, (mpfr_ptr)0);
    set_decimal(o->pixel, v->height);
    mpfr_div_si(o->pixel, o->pixel, v->height_px, RN);
    mpfr_set_si(o->bailout2, v->bailout, RN);
    mpfr_sqr(o->bailout2, o->bailout2, RN);
}

static void orbit_clear(orbit_t *o)
{
    mpfr_clears(o->zr, o->zi, o->cr, o->ci, o->t1, o->t2, o->t3, o->t4, o->pixel, o->bailout2, (mpfr_ptr)0);
    mpfr_clears(o->wr, o->wi, o->dr, o->di, o->u1, o->u2, o->u3, o->u4, (mpfr_ptr)0);
}

/* coordinate = centre + height * (twice + shift/SHIFT_PARTS * 2) / (2 H), where twice/2 is the offset in pixels.  The
 * factor is a ratio of two integers, so the only roundings are those of the decimal, one product, one quotient, one sum. */
static void coordinate(mpfr_t out, const char *centre, const view_t *v, long twice, long shift, mpfr_t scratch)
{
    set_decimal(out, v->height);
    mpfr_mul_si(out, out, twice * SHIFT_PARTS + 2 * shift, RN);
    mpfr_div_si(out, out, 2 * v->height_px * SHIFT_PARTS, RN);
    set_decimal(scratch, centre);
    mpfr_add(out, out, scratch, RN);
}

/* Puts the orbit at index 0 of the sample of pixel (x, y), moved by whole shift steps to the right and upwards. */
static void orbit_start(orbit_t *o, const view_t *v, long x, long y, long right, long up)
{
    mpfr_ptr re = v->julia ? o->zr : o->cr, im = v->julia ? o->zi : o->ci;
    coordinate(re, v->re, v, 2 * x + 1 - v->width_px, right, o->t1);
    coordinate(im, v->im, v, v->height_px - 2 * y - 1, up, o->t1);
    if (v->julia) {
        set_decimal(o->cr, v->parameter_re);
        set_decimal(o->ci, v->parameter_im);
    } else {
        mpfr_set_zero(o->zr, 1);
        mpfr_set_zero(o->zi, 1);
    }
    mpfr_set_si(o->dr, v->julia ? 1 : 0, RN);
    mpfr_set_zero(o->di, 1);
}

/* (ar + i ai) *= (br + i bi); each part is a sum of two products rounded once. */
static void multiply(mpfr_t ar, mpfr_t ai, mpfr_t br, mpfr_t bi, mpfr_t s, mpfr_t t)
{
    mpfr_fmms(s, ar, br, ai, bi, RN);
    mpfr_fmma(t, ar, bi, ai, br, RN);
    mpfr_swap(ar, s);
    mpfr_swap(ai, t);
}

/* d <- p z^(p-1) d, plus 1 where the derivative is taken by c. */
static void derive(orbit_t *o, const view_t *v)
{
    mpfr_set(o->wr, o->zr, RN);
    mpfr_set(o->wi, o->zi, RN);
    for (long k = 1; k < v->power; k++)
        multiply(o->dr, o->di, o->wr, o->wi, o->u1, o->u2);
    mpfr_mul_si(o->dr, o->dr, v->power, RN);
    mpfr_mul_si(o->di, o->di, v->power, RN);
    if (!v->julia)
        mpfr_add_si(o->dr, o->dr, 1, RN);
}

/* z <- z^p + c.  t1 and t2 hold the squares of both parts on entry. */
static void advance(orbit_t *o, const view_t *v)
{
    mpfr_sub(o->t1, o->t1, o->t2, RN); /* Re z^2 */
    mpfr_mul(o->t2, o->zr, o->zi, RN);
    mpfr_mul_2si(o->t2, o->t2, 1, RN); /* Im z^2 */
    if (v->power == 3) {
        multiply(o->zr, o->zi, o->t1, o->t2, o->t3, o->t4);
    } else {
        mpfr_swap(o->zr, o->t1);
        mpfr_swap(o->zi, o->t2);
    }
    mpfr_add(o->zr, o->zr, o->cr, RN);
    mpfr_add(o->zi, o->zi, o->ci, RN);
}

/* Runs to the first index outside the bailout circle and returns it, or -1 past the limit.  The derivative is carried only
 * when asked for: the shifted runs need the count alone. */
static long escape(orbit_t *o, const view_t *v, int with_derivative)
{
    for (long n = 0;; n++) {
        mpfr_sqr(o->t1, o->zr, RN);
        mpfr_sqr(o->t2, o->zi, RN);
        mpfr_add(o->t3, o->t1, o->t2, RN);
        if (mpfr_greater_p(o->t3, o->bailout2))
            return n;
        if (n == v->limit)
            return -1;
        if (with_derivative)
            derive(o, v);
        advance(o, v);
    }
}

/* mu and distance of an orbit that has just escaped at index s->n. */
static void measure(orbit_t *o, const view_t *v, sample_t *s)
{
    mpfr_set(o->wr, o->zr, RN);
    mpfr_set(o->wi, o->zi, RN);
    mpfr_hypot(o->u1, o->wr, o->wi, RN); /* |z| */
    mpfr_log(o->u2, o->u1, RN);          /* ln|z| */
    mpfr_set_si(o->u3, v->bailout, RN);
    mpfr_log(o->u3, o->u3, RN);
    mpfr_div(o->u3, o->u2, o->u3, RN);
    mpfr_log(o->u3, o->u3, RN);
    mpfr_set_si(o->u4, v->power, RN);
    mpfr_log(o->u4, o->u4, RN);
    mpfr_div(o->u3, o->u3, o->u4, RN); /* log_p(ln|z| / ln bailout) */
    mpfr_si_sub(o->u3, s->n + 1, o->u3, RN);
    s->mu = mpfr_get_d(o->u3, RN);

    mpfr_mul(o->u1, o->u1, o->u2, RN);
    mpfr_hypot(o->u2, o->dr, o->di, RN);
    mpfr_div(o->u1, o->u1, o->u2, RN);
    mpfr_div(o->u1, o->u1, o->pixel, RN);
    s->distance = mpfr_get_d(o->u1, RN);
}

static void run_sample(orbit_t *o, const view_t *v, sample_t *s)
{
    static const int right[4] = {1, -1, 0, 0}, up[4] = {0, 0, 1, -1};
    orbit_start(o, v, s->x, s->y, 0, 0);
    s->n = escape(o, v, 1);
    if (s->n >= 0)
        measure(o, v, s);
    s->robust = 1;
    for (int k = 0; k < 4 && s->robust; k++) {
        orbit_start(o, v, s->x, s->y, right[k], up[k]);
        s->robust = escape(o, v, 0) == s->n;
    }
}

/* ------------------------------------------------------------------ all samples of a view */

typedef struct {
    const view_t *view;
    sample_t *samples;
    mpfr_prec_t bits;
    long next; /* the sample to take next; guarded by the lock */
    pthread_mutex_t lock;
} job_t;

static void *work(void *argument)
{
    job_t *job = argument;
    orbit_t o;
    orbit_init(&o, job->view, job->bits);
    for (;;) {
        pthread_mutex_lock(&job->lock);
        long i = job->next++;
        pthread_mutex_unlock(&job->lock);
        if (i >= job->view->samples)
            break;
        run_sample(&o, job->view, &job->samples[i]);
    }
    orbit_clear(&o);
    mpfr_free_cache();
    return NULL;
}

/* A 64-bit linear congruential generator with Knuth's MMIX constants; the upper half is returned. */
static uint32_t draw(uint64_t *state)
{
    *state = *state * 6364136223846793005u + 1442695040888963407u;
    return (uint32_t)(*state >> 32);
}

static mpfr_prec_t bits_for(const view_t *v, long extra)
{
    mpfr_t pixel;
    mpfr_init2(pixel, 64);
    set_decimal(pixel, v->height);
    mpfr_div_si(pixel, pixel, v->height_px, RN);
    if (mpfr_sgn(pixel) <= 0)
        fail("the height must be greater than zero");
    long bits = 1 - (long)mpfr_get_exp(pixel); /* pixel >= 2^(exp - 1) */
    mpfr_clear(pixel);
    return (bits > 0 ? bits : 0) + GUARD + extra;
}

static void print_file(const view_t *v, const sample_t *s, mpfr_prec_t bits)
{
    printf("{\n\"name\": \"%s\",\n\"origin\": \"%s\",\n", v->name, v->origin);
    printf("\"set\": {\"kind\": \"%s\", \"power\": %ld", v->kind, v->power);
    if (v->julia)
        printf(", \"parameter\": {\"re\": \"%s\", \"im\": \"%s\"}", v->parameter_re, v->parameter_im);
    printf("},\n\"view\": {\"centre\": {\"re\": \"%s\", \"im\": \"%s\"}, \"height\": \"%s\"},\n", v->re, v->im, v->height);
    printf("\"iteration\": {\"limit\": %ld, \"bailout\": %ld},\n", v->limit, v->bailout);
    printf("\"lattice\": {\"width\": %ld, \"height\": %ld, \"samples\": %ld, \"seed\": %ld},\n", v->width_px, v->height_px,
           v->samples, v->seed);
    printf("\"precision\": {\"bits\": %ld, \"derivative_bits\": %d},\n\"samples\": [\n", (long)bits, DERIVATIVE_BITS);
    for (long i = 0; i < v->samples; i++, s++) {
        printf("{\"x\": %ld, \"y\": %ld, \"n\": %ld", s->x, s->y, s->n);
        if (s->n >= 0)
            printf(", \"mu\": %.17g, \"distance\": %.17g", s->mu, s->distance);
        printf(", \"robust\": %s}%s\n", s->robust ? "true" : "false", i + 1 < v->samples ? "," : "");
    }
    printf("]\n}\n");
}

int main(int argc, char **argv)
{
    long threads = 1, extra = 64;
    for (int i = 1; i < argc; i += 2) {
        long *option = !strcmp(argv[i], "-t") ? &threads : !strcmp(argv[i], "-x") ? &extra : NULL;
        if (!option || i + 1 == argc || (*option = atol(argv[i + 1])) < 0)
            fail("usage: truth [-t threads] [-x extra bits] < head.json > whole.json");
    }
    if (threads < 1 || threads > 16)
        fail("threads must lie between 1 and 16");

    char *text = read_all(stdin);
    view_t v = read_view(text);
    job_t job = {.view = &v, .bits = bits_for(&v, extra), .lock = PTHREAD_MUTEX_INITIALIZER};
    job.samples = calloc((size_t)v.samples, sizeof *job.samples);
    if (!job.samples)
        fail("out of memory");
    uint64_t state = (uint64_t)v.seed;
    for (long i = 0; i < v.samples; i++) {
        job.samples[i].x = (long)((uint64_t)draw(&state) * (uint64_t)v.width_px >> 32);
        job.samples[i].y = (long)((uint64_t)draw(&state) * (uint64_t)v.height_px >> 32);
    }

    pthread_t pool[16];
    for (long i = 1; i < threads; i++)
        if (pthread_create(&pool[i], NULL, work, &job))
            fail("cannot start a thread");
    work(&job);
    for (long i = 1; i < threads; i++)
        pthread_join(pool[i], NULL);
    print_file(&v, job.samples, job.bits);
    return 0;
}
