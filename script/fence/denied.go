package fence

import (
	"fmt"
	"io/fs"
)

// Denied is the error of a path that is not open to the script. It counts as
// fs.ErrPermission.
type Denied struct {
	Real   string // the path without links, absolute
	Access Access
}

// Error names the path and what would allow it.
func (d *Denied) Error() string {
	return fmt.Sprintf("a script may not %s %s unless it is allowed: -allow %s=%s", d.Access, d.Real, d.Access, d.Real)
}

// Is says that a Denied is a missing permission.
func (d *Denied) Is(target error) bool { return target == fs.ErrPermission }
