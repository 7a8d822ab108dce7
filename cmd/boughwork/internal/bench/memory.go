package bench

import (
	"os"
	"runtime"
	"runtime/debug"
	"strconv"
	"strings"
)

const (
	megabyte = 1e6  // bytes
	kibibyte = 1024 // bytes; the system says kB and means this

	// The files of a system that tells a process of its memory, the line that has the peak, and what resets it.
	statusFile = "/proc/self/status"
	resetFile  = "/proc/self/clear_refs"
	peakLine   = "VmHWM:"
	resetPeak  = "5"
)

// forget gives memory that is not in use back to the system and lets the peak begin anew, where the system can do so;
// elsewhere the peak is that of the whole run of the program.
func forget() {
	debug.FreeOSMemory()
	if f, err := os.OpenFile(resetFile, os.O_WRONLY, 0); err == nil {
		_, _ = f.WriteString(resetPeak) // where this is refused the old peak stands
		_ = f.Close()
	}
}

// peak returns the peak of the memory that the process held, in MB (1e6 bytes): what was in real memory if the system
// tells, else what was taken from the system.
func peak() float64 {
	if status, err := os.ReadFile(statusFile); err == nil {
		if kb, ok := peakOf(string(status)); ok {
			return kb * kibibyte / megabyte
		}
	}
	var m runtime.MemStats
	runtime.ReadMemStats(&m)
	return float64(m.Sys) / megabyte
}

// peakOf reads the peak, in kibibytes, from the text of the status file.
func peakOf(status string) (float64, bool) {
	for line := range strings.Lines(status) {
		if rest, ok := strings.CutPrefix(line, peakLine); ok {
			kb, err := strconv.ParseFloat(strings.TrimSuffix(strings.TrimSpace(rest), " kB"), 64)
			return kb, err == nil
		}
	}
	return 0, false
}
