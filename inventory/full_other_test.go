//go:build !linux

package inventory

const mountEnv = "GOODBIN_MOUNT_TEST"

// inOwnMounts needs mount namespaces, which only Linux has.
func inOwnMounts() int { return 77 }
