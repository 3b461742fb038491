package main

import (
	"os"
	"os/signal"
	"runtime/debug"
	"syscall"
	"time"
)

func main() {
	// A reader that goes away is a failed write like any other, not a silent end.
	signal.Ignore(syscall.SIGPIPE)
	c := &Command{Stdin: os.Stdin, Stdout: os.Stdout, Stderr: os.Stderr, Now: time.Now, Env: os.Getenv, Limit: debug.SetMemoryLimit}
	os.Exit(c.Main(os.Args[1:]))
}
