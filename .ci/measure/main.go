// Measure runs a command several times as a process of its own and prints the
// least and the middle of its times by the clock and of the processor time that it
// used, and the most memory that it held at once.
//
//	go run .ci/measure/main.go -runs 30 -time 1s -memory 200 driploop inspect
//
// The command may exit with 0 or 1. It is a failure when both least times are above
// the limit (on a busy machine only the clock is), or the memory is.
package main

import (
	"errors"
	"flag"
	"fmt"
	"os"
	"os/exec"
	"slices"
	"syscall"
	"time"
)

func main() {
	runs := flag.Int("runs", 1, "how often")
	limit := flag.Duration("time", 0, "limit of the least time; 0: none")
	memory := flag.Int64("memory", 0, "limit of the resident memory in MB; 0: none")
	flag.Parse()
	if err := measure(*runs, *limit, *memory, flag.Args()); err != nil {
		fmt.Fprintln(os.Stderr, "measure:", err)
		os.Exit(1)
	}
}

func measure(runs int, limit time.Duration, memory int64, args []string) error {
	var wall, cpu []time.Duration
	var peak int64
	for range runs {
		r, err := once(args)
		if err != nil {
			return err
		}
		wall, cpu, peak = append(wall, r.wall), append(cpu, r.cpu), max(peak, r.peak)
	}
	fmt.Printf("%d runs: clock %s, processor %s, at most %.1f MB resident\n",
		runs, leastAndMiddle(wall), leastAndMiddle(cpu), float64(peak)/1024)
	if limit > 0 && slices.Min(wall) > limit && slices.Min(cpu) > limit {
		return fmt.Errorf("the least time is above %s", limit)
	}
	if memory > 0 && peak > memory*1024 {
		return fmt.Errorf("the memory is above %d MB", memory)
	}
	return nil
}

func leastAndMiddle(d []time.Duration) string {
	slices.Sort(d)
	return fmt.Sprintf("least %.1f ms, median %.1f ms", 1e3*d[0].Seconds(), 1e3*d[len(d)/2].Seconds())
}

type run struct {
	wall, cpu time.Duration
	peak      int64 // resident memory in KiB, which Linux keeps for every process
}

func once(args []string) (run, error) {
	cmd := exec.Command(args[0], args[1:]...)
	cmd.Stderr = os.Stderr
	start := time.Now()
	err := cmd.Run()
	wall := time.Since(start)
	var status *exec.ExitError
	if errors.As(err, &status) && status.ExitCode() == 1 {
		err = nil
	}
	if err != nil {
		return run{}, err
	}
	s := cmd.ProcessState
	return run{wall, s.UserTime() + s.SystemTime(), s.SysUsage().(*syscall.Rusage).Maxrss}, nil
}
