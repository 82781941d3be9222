package inventory

import (
	"encoding/json"
	"fmt"
	"io"
	"os"
	"time"
)

// sidecar is the small file beside an open workbook that says who has it open. The lock itself is the kernel's, on the workbook; the
// sidecar only informs, so that one left over by a killed process does no harm.
type sidecar struct {
	path  string
	owner owner
}

type owner struct {
	PID   int       `json:"pid"`
	Host  string    `json:"host"`
	Since time.Time `json:"since"`
}

func sidecarPath(path string) string { return path + ".lock.json" }

// writeSidecar tells others who has the workbook. Where it cannot be written (a folder that is read-only) the lock holds all the same.
func writeSidecar(path string, now time.Time) sidecar {
	host, _ := os.Hostname()
	s := sidecar{sidecarPath(path), owner{PID: os.Getpid(), Host: host, Since: now.UTC().Truncate(time.Second)}}
	if _, err := os.Lstat(s.path); err == nil {
		if _, ours := readOwner(s.path); !ours {
			return sidecar{} // somebody's file of that name is not ours to replace
		}
	}
	text, err := json.Marshal(s.owner)
	if err != nil {
		return sidecar{}
	}
	temp := fmt.Sprintf("%s.%d", s.path, s.owner.PID)
	if os.WriteFile(temp, append(text, '\n'), 0o644) != nil || os.Rename(temp, s.path) != nil {
		os.Remove(temp)
		return sidecar{}
	}
	return s
}

// remove takes the sidecar away unless somebody else's stands there by now.
func (s sidecar) remove() {
	if s.path == "" {
		return
	}
	if o, ok := readOwner(s.path); ok && o.PID == s.owner.PID && o.Host == s.owner.Host {
		os.Remove(s.path)
	}
}

func readOwner(path string) (owner, bool) {
	file, err := os.Open(path)
	if err != nil {
		return owner{}, false
	}
	defer file.Close()
	text, err := io.ReadAll(io.LimitReader(file, 4096))
	var o owner
	if err != nil || json.Unmarshal(text, &o) != nil || o.PID <= 0 {
		return owner{}, false
	}
	return o, true
}

// busyText says who has the workbook open and what to do.
func busyText(path string) string {
	who := "another process"
	if o, ok := readOwner(sidecarPath(path)); ok {
		who = fmt.Sprintf("process %d on %q since %s", o.PID, o.Host, o.Since.Local().Format("2006-01-02 15:04"))
	}
	return fmt.Sprintf("%s is in use by %s: close it there, or read a backup copy of it meanwhile", quote(path), who)
}
