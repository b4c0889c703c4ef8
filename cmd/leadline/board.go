package main

import (
	"errors"
	"fmt"
	"log/slog"

	"github.com/spf13/cobra"

	"leadline/jobs"
	"leadline/jobs/board"
)

// boardFlags are the flags of board.
type boardFlags struct {
	listen, token, certificate, key string
}

func boardCommand() *cobra.Command {
	var g boardFlags
	c := &cobra.Command{
		Use: "board", Short: "show a queue as a web page",
		Long: `Serves a page of a queue's prints and workers until it is interrupted, and
prints its address, which holds a fresh token: open it, and keep it to yourself.
With --token-file the token is that of the file, and the page asks for it.

The page is this machine's alone unless --listen says otherwise; other machines
reach it over TLS only, with a token of yours. Who has the token can pause,
cancel and remove prints.`,
		Example: `  leadline board
  leadline board --queue postgres://farm@db.example/leadline
  leadline board --listen :5323 --certificate board.pem --key board.key \
      --token-file board.token`,
		Args: noArguments, ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(cmd *cobra.Command, _ []string) error { return runBoard(cmd, g) },
	}
	f := c.Flags()
	f.SortFlags = false
	f.String("queue", "", "the queue's `ADDRESS`: a file, or postgres://… (default $"+queueVariable+", else the desk's own)")
	f.StringVar(&g.listen, "listen", board.DefaultListen, "serve at `HOST:PORT`; port 0 is any that is free")
	f.StringVar(&g.token, "token-file", "", "take the token from `FILE`, which must be yours alone")
	f.StringVar(&g.certificate, "certificate", "", "serve over TLS with the certificates in the PEM `FILE`")
	f.StringVar(&g.key, "key", "", "the PEM `FILE` of the certificate's key")
	return c
}

func runBoard(cmd *cobra.Command, g boardFlags) error {
	ctx := cmd.Context()
	log := slog.New(slog.NewTextHandler(cmd.ErrOrStderr(), &slog.HandlerOptions{Level: slog.LevelError}))
	o := board.Options{Listen: g.listen, Certificate: g.certificate, Key: g.key, Log: log}
	if g.token != "" {
		var err error
		if o.Token, err = board.ReadToken(g.token); err != nil {
			return boardUsage(err)
		}
	}
	return withQueue(cmd, jobs.Options{}, func(q *jobs.Queue) error {
		river, err := q.Console(board.RiverPrefix, log)
		if err != nil {
			return err
		}
		o.River = river
		s, err := board.Listen(ctx, q, o)
		if err != nil {
			return boardUsage(err)
		}
		if err := river.Start(ctx); err != nil {
			return fmt.Errorf("starting River's page: %w", err)
		}
		if _, err := fmt.Fprintln(cmd.OutOrStdout(), s.Address()); err != nil {
			return err
		}
		return s.Serve(ctx)
	})
}

// boardUsage makes choices that the board refuses a wrong call.
func boardUsage(err error) error {
	var refused *board.OptionError
	if errors.As(err, &refused) {
		return usage(err, "")
	}
	return err
}
