ALTER TABLE leadline_tile ADD COLUMN look bytea;

CREATE INDEX leadline_tile_recent ON leadline_tile (worker, finished) WHERE state = 'done';

CREATE TABLE leadline_loss (
    id        bigint  GENERATED ALWAYS AS IDENTITY PRIMARY KEY,
    print     bigint  NOT NULL REFERENCES leadline_print (id) ON DELETE CASCADE,
    idx       integer NOT NULL,
    worker    text    NOT NULL
);

CREATE INDEX leadline_loss_print ON leadline_loss (print, idx);

CREATE TABLE leadline_name (
    id        text    PRIMARY KEY
);
