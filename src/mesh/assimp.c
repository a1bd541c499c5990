/* assimp.c - every format but OBJ, STL and PLY, through Assimp
 *
 * Assimp reads; it repairs nothing, cuts nothing and applies no transform: its scene is walked here, with transforms in double, and
 * each of its indices is checked. It gets the file from memory under a name of our choice, and other files only when they are files.
 */
#include "base/vec3.h"
#include "mesh/readers.h"
#include "mesh/text.h"
#include <assimp/cfileio.h>
#include <assimp/cimport.h>
#include <assimp/commonMetaData.h>
#include <assimp/config.h>
#include <assimp/material.h>
#include <assimp/scene.h>
#include <fcntl.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>

#define INSTANCED_FACETS_MAX 200000000u     /* a few nested instances can ask for more than any machine has */

typedef struct {
    const rg_file *file;
    const char *name;           /* under which Assimp asks for it */
} shelf;

typedef struct {
    const char *text;
    char *owned;                /* text, when it is no loan */
    size_t n, at;
} open_file;

static open_file *opened(struct aiFile *file) { return (open_file *)(void *)file->UserData; }

static size_t read_bytes(struct aiFile *file, char *to, size_t size, size_t count)
{
    open_file *f = opened(file);
    const size_t left = size ? (f->n - f->at) / size : 0, n = count < left ? count : left;
    memcpy(to, f->text + f->at, n * size);
    f->at += n * size;
    return n;
}

static size_t write_bytes(struct aiFile *file, const char *from, size_t size, size_t count)
{
    (void)file, (void)from, (void)size, (void)count;
    return 0;
}

static size_t tell(struct aiFile *file) { return opened(file)->at; }
static size_t file_size(struct aiFile *file) { return opened(file)->n; }
static void flush(struct aiFile *file) { (void)file; }

static enum aiReturn seek(struct aiFile *file, size_t offset, enum aiOrigin origin)
{
    open_file *f = opened(file);
    const size_t to = origin == aiOrigin_SET ? offset : origin == aiOrigin_CUR ? f->at + offset : f->n + offset;
    if (to > f->n) return aiReturn_FAILURE;
    f->at = to;
    return aiReturn_SUCCESS;
}

/* A file that the mesh file names, such as a buffer: whole, and only when it is a plain file. */
static bool read_companion(open_file *f, const char *name)
{
    struct stat info;
    const int fd = open(name, O_RDONLY | O_NONBLOCK | O_CLOEXEC);
    if (fd < 0) return false;
    bool good = fstat(fd, &info) == 0 && S_ISREG(info.st_mode) && (f->owned = malloc((size_t)info.st_size + 1)) != NULL;
    f->text = f->owned;
    struct rlimit limit;        /* where memory is bounded by the size of the mesh file, this one adds to it */
    if (good && getrlimit(RLIMIT_AS, &limit) == 0 && limit.rlim_cur != RLIM_INFINITY) {
        const rlim_t wider = limit.rlim_cur + 64 * (rlim_t)info.st_size;
        limit.rlim_cur = wider < limit.rlim_max ? wider : limit.rlim_max;
        setrlimit(RLIMIT_AS, &limit);
    }
    while (good && f->n < (size_t)info.st_size) {
        const ssize_t n = read(fd, f->owned + f->n, (size_t)info.st_size - f->n);
        if (n <= 0) good = false;
        else f->n += (size_t)n;
    }
    close(fd);
    return good;
}

static struct aiFile *open_named(struct aiFileIO *io, const char *name, const char *mode)
{
    const shelf *s = (const shelf *)(void *)io->UserData;
    if (mode[0] != 'r') return NULL;
    open_file *f = calloc(1, sizeof *f);
    struct aiFile *file = calloc(1, sizeof *file);
    const bool own = strcmp(name, s->name) == 0;
    if (f && own) f->text = s->file->text, f->n = s->file->n;
    if (!f || !file || (!own && !read_companion(f, name))) {
        if (f) free(f->owned);
        free(f);
        free(file);
        return NULL;
    }
    *file = (struct aiFile){read_bytes, write_bytes, tell, file_size, seek, flush, (aiUserData)f};
    return file;
}

static void close_file(struct aiFileIO *io, struct aiFile *file)
{
    (void)io;
    if (!file) return;
    free(opened(file)->owned);
    free(opened(file));
    free(file);
}

/* Rows of a transform, without the last. */
typedef struct { double row[3][4]; } transform;

static transform transform_of(const struct aiMatrix4x4 *m)
{
    return (transform){{{m->a1, m->a2, m->a3, m->a4}, {m->b1, m->b2, m->b3, m->b4}, {m->c1, m->c2, m->c3, m->c4}}};
}

static transform after(const transform *outer, const transform *inner)
{
    transform t;
    for (int i = 0; i < 3; i++)
        for (int k = 0; k < 4; k++)
            t.row[i][k] = outer->row[i][0] * inner->row[0][k] + outer->row[i][1] * inner->row[1][k] +
                          outer->row[i][2] * inner->row[2][k] + (k == 3 ? outer->row[i][3] : 0.0);
    return t;
}

static vec3 column(const transform *t, int k) { return (vec3){t->row[0][k], t->row[1][k], t->row[2][k]}; }

static bool mirrors(const transform *t) { return vec3_dot(column(t, 0), vec3_cross(column(t, 1), column(t, 2))) < 0.0; }

static double largest_scale(const transform *t)
{
    return fmax(vec3_norm(column(t, 0)), fmax(vec3_norm(column(t, 1)), vec3_norm(column(t, 2))));
}

/* Names that a format or its reader gives to what has none, and scenes that are called just that. */
static bool is_generic(const char *name)
{
    static const char *const whole[] = {"DefaultMaterial", "Default_Material", "(null)", "None", "ROOT", "RootNode", "Scene", "scene",
                                        "world", "World", "defaultobject"};
    static const char *const start[] = {"<", "%%%", "$Collada", "nodes[", "meshes["};
    for (size_t i = 0; i < sizeof whole / sizeof whole[0]; i++)
        if (strcmp(name, whole[i]) == 0) return true;
    for (size_t i = 0; i < sizeof start / sizeof start[0]; i++)
        if (strncmp(name, start[i], strlen(start[i])) == 0) return true;
    return name[0] == 0;
}

static rg_status part_of(rg_soup *soup, uint32_t *part, const struct aiScene *scene, const struct aiNode *node,
                         const struct aiMesh *mesh, rg_error *err)
{
    struct aiString material = {0, ""};
    if (mesh->mMaterialIndex < scene->mNumMaterials)
        aiGetMaterialString(scene->mMaterials[mesh->mMaterialIndex], AI_MATKEY_NAME, &material);
    const char *group = is_generic(node->mName.data) ? mesh->mName.data : node->mName.data;
    if (is_generic(group)) group = "";
    const char *tail = is_generic(material.data) ? "" : material.data;
    return rg_soup_part_of(soup, part, group, strnlen(group, MAXLEN), tail, strnlen(tail, MAXLEN), err);
}

static rg_status take_face(rg_soup *soup, const struct aiMesh *mesh, const struct aiFace *face, uint32_t first, bool mirrored,
                           uint32_t part, uint32_t **corner, size_t *held, rg_error *err)
{
    const size_t n = face->mIndices ? face->mNumIndices : 0;
    if (n > *held) {
        uint32_t *wide = realloc(*corner, 2 * n * sizeof *wide);
        if (!wide) return rg_fail(err, RG_NO_MEMORY, "no memory for a face of %zu corners", n);
        *corner = wide;
        *held = 2 * n;
    }
    for (size_t i = 0; i < n; i++) {
        const uint32_t index = face->mIndices[mirrored ? n - 1 - i : i];
        if (index >= mesh->mNumVertices)
            return rg_fail(err, RG_BAD_INPUT, "a face has corner %u, but its mesh has %u vertices", index, mesh->mNumVertices);
        (*corner)[i] = first + index;
    }
    return rg_soup_face(soup, n, *corner, part, err);
}

static rg_status take_mesh(rg_soup *soup, const struct aiScene *scene, const struct aiNode *node, const struct aiMesh *mesh,
                           const transform *t, rg_error *err)
{
    if (mesh->mNumFaces > INSTANCED_FACETS_MAX - soup->n_facets || mesh->mNumVertices > 3 * INSTANCED_FACETS_MAX - soup->n_vertices)
        return rg_fail(err, RG_BAD_INPUT, "its scene repeats meshes until there are more than %u facets: write a smaller part of it",
                       INSTANCED_FACETS_MAX);
    uint32_t part, *corner = NULL;
    size_t held = 0;
    const uint32_t first = (uint32_t)soup->n_vertices;
    float largest = 0.0f;
    if (mesh->mNumFaces == 0 || !mesh->mFaces || !mesh->mVertices) return RG_OK;
    rg_status status = part_of(soup, &part, scene, node, mesh, err);
    if (!status) status = rg_soup_reserve(soup, mesh->mNumVertices, mesh->mNumFaces, err);
    for (size_t v = 0; v < mesh->mNumVertices && !status; v++) {
        const struct aiVector3D *r = &mesh->mVertices[v];
        double out[3];
        for (int i = 0; i < 3; i++)
            out[i] = t->row[i][0] * (double)r->x + t->row[i][1] * (double)r->y + t->row[i][2] * (double)r->z + t->row[i][3];
        largest = fmaxf(largest, fmaxf(fabsf(r->x), fmaxf(fabsf(r->y), fabsf(r->z))));
        status = rg_soup_vertex(soup, out[0], out[1], out[2], err);
    }
    /* The step within a mesh: a transform moves all its vertices by one and the same amount. */
    rg_soup_note_step(soup, largest * (float)largest_scale(t), true);
    const bool mirrored = mirrors(t);
    for (size_t f = 0; f < mesh->mNumFaces && !status; f++)
        status = take_face(soup, mesh, &mesh->mFaces[f], first, mirrored, part, &corner, &held, err);
    free(corner);
    return status;
}

typedef struct { const struct aiNode *node; transform to_root; } visit;

static rg_status walk(rg_soup *soup, const struct aiScene *scene, transform root, rg_error *err)
{
    size_t n = 1, held = 64;
    visit *stack = malloc(held * sizeof *stack);
    rg_status status = stack ? RG_OK : rg_fail(err, RG_NO_MEMORY, "no memory to walk its scene");
    if (stack) stack[0] = (visit){scene->mRootNode, root};
    while (n && !status) {
        const visit v = stack[--n];
        for (unsigned i = 0; i < v.node->mNumMeshes && v.node->mMeshes && !status; i++) {
            if (v.node->mMeshes[i] >= scene->mNumMeshes || !scene->mMeshes[v.node->mMeshes[i]])
                status = rg_fail(err, RG_BAD_INPUT, "its scene names mesh %u of %u", v.node->mMeshes[i], scene->mNumMeshes);
            else
                status = take_mesh(soup, scene, v.node, scene->mMeshes[v.node->mMeshes[i]], &v.to_root, err);
        }
        const size_t children = v.node->mChildren ? v.node->mNumChildren : 0;
        if (n + children > held && !status) {
            held = 2 * (n + children);
            visit *wide = realloc(stack, held * sizeof *stack);
            if (wide) stack = wide;
            else status = rg_fail(err, RG_NO_MEMORY, "no memory to walk its scene");
        }
        for (size_t i = children; i > 0 && !status; i--) {      /* the first child comes off the stack first */
            const struct aiNode *child = v.node->mChildren[i - 1];
            if (!child) continue;
            const transform own = transform_of(&child->mTransformation);
            stack[n++] = (visit){child, after(&v.to_root, &own)};
        }
    }
    free(stack);
    return status;
}

/* The value of a number that the file says about itself, or otherwise. */
static double metadata(const struct aiScene *scene, const char *key, double otherwise)
{
    for (unsigned i = 0; scene->mMetaData && i < scene->mMetaData->mNumProperties; i++) {
        const struct aiMetadataEntry *e = &scene->mMetaData->mValues[i];
        if (strcmp(scene->mMetaData->mKeys[i].data, key) != 0 || !e->mData) continue;
        if (e->mType == AI_INT32) return *(const int32_t *)e->mData;
        if (e->mType == AI_UINT64) return (double)*(const uint64_t *)e->mData;
        if (e->mType == AI_FLOAT) return (double)*(const float *)e->mData;
        if (e->mType == AI_DOUBLE) return *(const double *)e->mData;
    }
    return otherwise;
}

static void name_format(char out[32], const struct aiScene *scene)
{
    static const struct { const char *in, *name; } known[] = {{"FBX", "FBX"}, {"glTF", "glTF"}, {"Collada", "COLLADA"},
                                                                {"STL", "STL"}, {"PLY", "PLY"}, {"Wavefront", "OBJ"}};
    const char *said = "Assimp";
    for (unsigned i = 0; scene->mMetaData && i < scene->mMetaData->mNumProperties; i++)
        if (strcmp(scene->mMetaData->mKeys[i].data, AI_METADATA_SOURCE_FORMAT) == 0 && scene->mMetaData->mValues[i].mType == AI_AISTRING)
            said = ((const struct aiString *)scene->mMetaData->mValues[i].mData)->data;
    for (size_t i = 0; i < sizeof known / sizeof known[0]; i++)
        if (strstr(said, known[i].in)) said = known[i].name;
    const char *end = strstr(said, " Importer");
    if (!end) end = strstr(said, " Reader");
    snprintf(out, 32, "%.*s", end ? (int)(end - said < 31 ? end - said : 31) : 31, said);
}

/* Files that our own readers refuse are not to come in by this door. */
static bool has_own_reader(const char *format)
{
    return strcmp(format, "STL") == 0 || strcmp(format, "PLY") == 0 || strcmp(format, "OBJ") == 0;
}

static rg_axis axis_of(double line, double sign, rg_axis otherwise)
{
    return line >= 0.0 && line <= 2.0 ? (rg_axis)(RG_PLUS_X + 2 * (int)line + (sign < 0.0)) : otherwise;
}

/* What the format says of unit and axes, and the transform to begin with: the root's own, but not where Assimp made it up. */
static transform find_origin(rg_origin *origin, const struct aiScene *scene)
{
    const transform as_is = {{{1, 0, 0, 0}, {0, 1, 0, 0}, {0, 0, 1, 0}}};
    const transform z_to_y = {{{1, 0, 0, 0}, {0, 0, 1, 0}, {0, -1, 0, 0}}};
    const transform root = transform_of(&scene->mRootNode->mTransformation);
    if (strcmp(origin->format, "FBX") == 0) {
        const double unit_cm = metadata(scene, "UnitScaleFactor", 1.0);
        origin->own.unit_m = isfinite(unit_cm) && unit_cm > 0.0 ? 0.01 * unit_cm : 0.01;
        origin->own.up = axis_of(metadata(scene, "UpAxis", 1.0), metadata(scene, "UpAxisSign", 1.0), RG_PLUS_Y);
        origin->own.front = axis_of(metadata(scene, "FrontAxis", 2.0), metadata(scene, "FrontAxisSign", 1.0), RG_PLUS_Z);
        if ((origin->own.up - RG_PLUS_X) / 2 == (origin->own.front - RG_PLUS_X) / 2) origin->own.front = RG_AXIS_DEFAULT;
        strcpy(origin->unit_from, "the file");
        strcpy(origin->axes_from, "the file");
        return as_is;
    }
    if (strcmp(origin->format, "glTF") == 0) {
        origin->own = (rg_mesh_frame){1.0, RG_PLUS_Y, RG_PLUS_Z};
        strcpy(origin->unit_from, "as glTF has it");
        strcpy(origin->axes_from, "as glTF has it");
    } else if (strcmp(origin->format, "COLLADA") == 0) {
        origin->own = (rg_mesh_frame){1.0, RG_PLUS_Y, RG_AXIS_DEFAULT};
        strcpy(origin->unit_from, "the file's unit is applied");
        strcpy(origin->axes_from, "the file's up axis is turned to +y");
    } else if (memcmp(&root, &z_to_y, sizeof root) == 0) {
        return as_is;       /* formats with z up, which Assimp turned to y up */
    }
    return root;
}

static rg_status say_why(rg_error *err)
{
    const char *said = aiGetErrorString();
    if (!said || !said[0] || strstr(said, "No suitable reader"))
        return rg_fail(err, RG_BAD_INPUT, "this is no mesh format that is known here");
    if (strstr(said, "bad_alloc") || strstr(said, "length_error"))
        return rg_fail(err, RG_BAD_INPUT, "its reader asks for more memory than there is: the file is damaged or too large for this machine");
    char clean[201];
    size_t n = 0;
    for (; said[n] && n < sizeof clean - 1; n++) clean[n] = said[n] >= ' ' && said[n] < 0x7f ? said[n] : ' ';
    clean[n] = 0;
    return rg_fail(err, RG_BAD_INPUT, "it cannot be read as a mesh: %s", clean);
}

static rg_word word_but_remark(rg_text *text)
{
    rg_word word = rg_word_anywhere(text);
    while (word.n && word.at[0] == '#') {
        rg_next_line(text);
        word = rg_word_anywhere(text);
    }
    return word;
}

/* Assimp fills memory for as many vertices as an OFF promises before it looks for one. A vertex is three numbers with a blank each. */
static rg_status check_promise(const rg_file *file, rg_error *err)
{
    rg_text text = {file->text, file->text + file->n, 1};
    const rg_word first = word_but_remark(&text);
    int64_t n_vertices, n_faces;
    if (first.n < 3 || memcmp(first.at + first.n - 3, "OFF", 3) != 0) return RG_OK;
    if (!rg_whole_of(&n_vertices, word_but_remark(&text)) || !rg_whole_of(&n_faces, word_but_remark(&text))) return RG_OK;
    if (n_vertices < 0 || n_faces < 0 || (uint64_t)n_vertices > file->n / 6 || (uint64_t)n_faces > file->n / 2)
        return rg_fail(err, RG_BAD_INPUT, "its head promises %lld vertices and %lld faces, which its %zu bytes cannot hold",
                       (long long)n_vertices, (long long)n_faces, file->n);
    return RG_OK;
}

/* An ending for a file whose own is wrong. Some readers of Assimp look at the content only when the name is theirs. */
static const char *ending_of(const rg_file *file)
{
    static const struct { const char *start, *within, *ending; } known[] = {
        {"glTF", "", "glb"}, {"{", "\"asset\"", "gltf"}, {"Kaydara FBX Binary", "", "fbx"}, {"<", "<COLLADA", "dae"}, {"; FBX", "", "fbx"}};
    for (size_t i = 0; i < sizeof known / sizeof known[0]; i++) {
        const size_t n = strlen(known[i].start);
        if (file->n >= n && memcmp(file->text, known[i].start, n) == 0 &&
            memmem(file->text, file->n, known[i].within, strlen(known[i].within)))
            return known[i].ending;
    }
    return "anymesh";       /* that no reader claims, so that all look */
}

rg_status rg_read_assimp(rg_soup *soup, rg_origin *origin, const rg_file *file, bool by_content, rg_error *err)
{
    rg_status status = check_promise(file, err);
    if (status) return status;
    const char *slash = strrchr(file->path, '/');
    const size_t folder = slash ? (size_t)(slash - file->path) + 1 : 0;
    char *name = by_content ? malloc(folder + 16) : strdup(file->path);
    if (!name) return rg_fail(err, RG_NO_MEMORY, "no memory for a name");
    if (by_content) {
        memcpy(name, file->path, folder);
        sprintf(name + folder, "a.%s", ending_of(file));
    }
    shelf s = {file, name};
    struct aiFileIO io = {open_named, close_file, (aiUserData)&s};
    struct aiPropertyStore *options = aiCreatePropertyStore();
    aiSetImportPropertyInteger(options, AI_CONFIG_IMPORT_NO_SKELETON_MESHES, 1);
    aiSetImportPropertyInteger(options, AI_CONFIG_IMPORT_AC_SEPARATE_BFCULL, 0);
    aiSetImportPropertyInteger(options, AI_CONFIG_IMPORT_AC_EVAL_SUBDIVISION, 0);  /* a digit in the file would be 4^n facets */
    const struct aiScene *scene = aiImportFileExWithProperties(name, 0, &io, options);
    if (!scene) status = say_why(err);
    else if (!scene->mRootNode) status = rg_fail(err, RG_BAD_INPUT, "there is no scene in it");
    else name_format(origin->format, scene);
    if (!status && has_own_reader(origin->format)) status = rg_fail(err, RG_BAD_INPUT, "it looks like %s, but is none", origin->format);
    if (!status) status = walk(soup, scene, find_origin(origin, scene), err);
    aiReleaseImport(scene);
    aiReleasePropertyStore(options);
    free(name);
    return status;
}
