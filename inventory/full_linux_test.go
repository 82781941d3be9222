package inventory

import (
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"

	"goodbin/screening"
)

// A full disk and a read-only disk are real ones here: a child process in its own mount namespace mounts a file system of 2 MB in memory,
// which vanishes with it. Where the system does not let it (no user namespaces, no root) the test is skipped.

// mountEnv names the folder on which the child mounts, and what it tries there.
const mountEnv = "GOODBIN_MOUNT_TEST"

func runInOwnMounts(t *testing.T, what string) {
	t.Helper()
	cmd := exec.Command(os.Args[0])
	cmd.Env = append(os.Environ(), mountEnv+"="+what+":"+t.TempDir())
	cmd.SysProcAttr = &syscall.SysProcAttr{
		Cloneflags:  syscall.CLONE_NEWUSER | syscall.CLONE_NEWNS,
		UidMappings: []syscall.SysProcIDMap{{ContainerID: 0, HostID: os.Getuid(), Size: 1}},
		GidMappings: []syscall.SysProcIDMap{{ContainerID: 0, HostID: os.Getgid(), Size: 1}},
	}
	out, err := cmd.CombinedOutput()
	var exit *exec.ExitError
	switch {
	case err == nil && strings.Contains(string(out), "done"):
		t.Logf("%s", out)
	case errors.As(err, &exit) && exit.ExitCode() == cannotMount, err != nil && exit == nil:
		t.Skipf("this system lets nobody mount a file system of his own: %v %s", err, out)
	default:
		t.Errorf("%v\n%s", err, out)
	}
}

const cannotMount = 77

func inOwnMounts() int {
	what, folder, _ := strings.Cut(os.Getenv(mountEnv), ":")
	if err := syscall.Mount("tmpfs", folder, "tmpfs", 0, "size=2m"); err != nil {
		fmt.Println("mount:", err)
		return cannotMount
	}
	try := map[string]func(string) error{"full": tryFullDisk, "read-only": tryReadOnlyDisk}[what]
	if err := try(folder); err != nil {
		fmt.Println(err)
		return 1
	}
	fmt.Println("done")
	return 0
}

// tryFullDisk saves until there is no room, then looks for everything that was acknowledged, frees room and goes on.
func tryFullDisk(folder string) error {
	ballast := filepath.Join(folder, "ballast")
	if err := os.WriteFile(ballast, make([]byte, 1<<20), 0o600); err != nil {
		return err
	}
	path := filepath.Join(folder, "parts.goodbin")
	w, err := Open(path, Options{Create: true})
	if err != nil {
		return err
	}
	defer w.Close()
	if _, err := w.AddLot(Lot{Kind: "electrolytic"}); err != nil {
		return err
	}
	saved, err := fillUp(w)
	if !errors.Is(err, ErrFull) || !strings.Contains(err.Error(), "free some space") {
		return fmt.Errorf("on a full disk: %w", err)
	}
	if err := w.Backup(context.Background(), filepath.Join(folder, "copy")); !errors.Is(err, ErrFull) {
		return fmt.Errorf("backup to a full disk: %w", err)
	}
	if _, err := Open(filepath.Join(folder, "another"), Options{Create: true}); !errors.Is(err, ErrFull) {
		return fmt.Errorf("new workbook on a full disk: %w", err)
	}
	count := func(want int) error {
		counts, err := w.Counts()
		if err != nil || counts.All() != want {
			return fmt.Errorf("%d parts, %w; want %d", counts.All(), err, want)
		}
		report, err := w.Check(context.Background())
		if err != nil || !report.OK() || report.Parts != want {
			return fmt.Errorf("check: %+v, %w; want %d parts", report, err, want)
		}
		return nil
	}
	if err := count(saved); err != nil {
		return fmt.Errorf("after the disk was full: %w", err)
	}
	if err := os.Remove(ballast); err != nil {
		return err
	}
	if _, err := w.SavePart(judged(1, screening.Accept, 1e-6), "saved"); err != nil {
		return fmt.Errorf("after room was made: %w", err)
	}
	if err := count(saved + 1); err != nil {
		return err
	}
	if err := w.Close(); err != nil {
		return err
	}
	if names, err := filepath.Glob(filepath.Join(folder, ".*")); err != nil || len(names) > 0 {
		return fmt.Errorf("left behind: %v, %w", names, err)
	}
	fmt.Println(saved, "parts saved before the disk was full")
	_, err = Verify(path)
	return err
}

// fillUp saves parts until one is refused, and says how many were not.
func fillUp(w *Workbook) (saved int, err error) {
	for err == nil && saved < 100_000 {
		p := judged(1, screening.Accept, 1e-6)
		p.Note = strings.Repeat("x", 500)
		if _, err = w.SavePart(p, "saved"); err == nil {
			saved++
		}
	}
	return saved, err
}

// tryReadOnlyDisk: nothing can be made or written there, but everything can be read.
func tryReadOnlyDisk(folder string) error {
	path := filepath.Join(folder, "parts.goodbin")
	w, err := Open(path, Options{Create: true})
	if err != nil {
		return err
	}
	if _, err := w.AddLot(Lot{Kind: "electrolytic"}); err != nil {
		return err
	}
	if err := w.Close(); err != nil {
		return err
	}
	if err := syscall.Mount("", folder, "", syscall.MS_REMOUNT|syscall.MS_RDONLY, ""); err != nil {
		return fmt.Errorf("remount: %w", err)
	}
	if _, err := Open(path, Options{}); !errors.Is(err, ErrReadOnly) || !strings.Contains(err.Error(), "permissions") {
		return fmt.Errorf("opened for writing: %w", err)
	}
	if _, err := Open(filepath.Join(folder, "another"), Options{Create: true}); !errors.Is(err, ErrReadOnly) ||
		!strings.Contains(err.Error(), "another place") {
		return fmt.Errorf("made anew: %w", err)
	}
	r, err := Open(path, Options{ReadOnly: true})
	if err != nil {
		return fmt.Errorf("opened for reading: %w", err)
	}
	defer r.Close()
	if err := r.Backup(context.Background(), filepath.Join(folder, "copy")); !errors.Is(err, ErrReadOnly) {
		return fmt.Errorf("backup into a read-only folder: %w", err)
	}
	_, err = r.Lot(1)
	return err
}

func TestAFullDiskLosesNothing(t *testing.T) { runInOwnMounts(t, "full") }

func TestAReadOnlyDiskCanBeRead(t *testing.T) { runInOwnMounts(t, "read-only") }
