CREATE TABLE leadline_print (
    id        integer PRIMARY KEY AUTOINCREMENT,
    title     text    NOT NULL,
    frame     text    NOT NULL,
    out       text    NOT NULL,
    priority  integer NOT NULL CHECK (priority BETWEEN 1 AND 4),
    scale     integer NOT NULL,
    x         integer NOT NULL,
    y         integer NOT NULL,
    width     integer NOT NULL,
    height    integer NOT NULL,
    crop      integer NOT NULL,
    audit     integer NOT NULL,
    side      integer NOT NULL,
    release   text    NOT NULL,
    numerics  integer NOT NULL,
    state     text    NOT NULL CHECK (state IN ('queued', 'planning', 'rendering', 'assembling', 'done', 'cancelled', 'failed')),
    paused    integer NOT NULL DEFAULT 0,
    reason    text    NOT NULL DEFAULT '',
    hint      text    NOT NULL DEFAULT '',
    tiles     integer NOT NULL,
    next      integer NOT NULL DEFAULT 0,
    attempts  bigint  NOT NULL DEFAULT 0,
    rescued   bigint  NOT NULL DEFAULT 0,
    added     bigint  NOT NULL,
    began     bigint  NOT NULL DEFAULT 0,
    ended     bigint  NOT NULL DEFAULT 0,
    file      text    NOT NULL DEFAULT '',
    sidecar   text    NOT NULL DEFAULT '',
    sha256    text    NOT NULL DEFAULT '',
    bytes     bigint  NOT NULL DEFAULT 0
);

CREATE INDEX leadline_print_state ON leadline_print (state);

CREATE TABLE leadline_tile (
    print     bigint  NOT NULL REFERENCES leadline_print (id) ON DELETE CASCADE,
    idx       integer NOT NULL,
    state     text    NOT NULL CHECK (state IN ('idle', 'queued', 'running', 'done')),
    try       integer NOT NULL DEFAULT 0,
    faults    integer NOT NULL DEFAULT 0,
    job       bigint  NOT NULL DEFAULT 0,
    worker    text    NOT NULL DEFAULT '',
    started   bigint  NOT NULL DEFAULT 0,
    finished  bigint  NOT NULL DEFAULT 0,
    pixels    bigint  NOT NULL DEFAULT 0,
    file      text    NOT NULL DEFAULT '',
    sum       text    NOT NULL DEFAULT '',
    PRIMARY KEY (print, idx)
);

CREATE INDEX leadline_tile_state ON leadline_tile (print, state, finished);

CREATE INDEX leadline_tile_held ON leadline_tile (state, worker) WHERE state IN ('queued', 'running');

CREATE TABLE leadline_worker (
    id        text    PRIMARY KEY,
    name      text    NOT NULL,
    host      text    NOT NULL,
    pid       bigint  NOT NULL,
    slots     integer NOT NULL,
    release   text    NOT NULL,
    numerics  integer NOT NULL,
    beat      bigint  NOT NULL,
    started   bigint  NOT NULL,
    seen      bigint  NOT NULL
);

CREATE TABLE leadline_payload (
    print     bigint  NOT NULL REFERENCES leadline_print (id) ON DELETE CASCADE,
    idx       integer NOT NULL,
    data      blob      NOT NULL,
    PRIMARY KEY (print, idx)
);
