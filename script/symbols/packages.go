package symbols

// Ketloom lists the packages of Ketloom that scripts may import. The generator
// and the checker read this list; nothing else names them.
var Ketloom = []string{
	"ketloom/basis",
	"ketloom/basis/group",
	"ketloom/basis/lattice",
	"ketloom/lanczos",
	"ketloom/lanczos/archive",
	"ketloom/lanczos/dense",
	"ketloom/lanczos/entangle",
	"ketloom/lanczos/label",
	"ketloom/operator",
	"ketloom/operator/matrix",
	"ketloom/operator/model",
	"ketloom/script/host",
	"ketloom/script/progress",
	"ketloom/script/report",
	"ketloom/script/report/page",
	"ketloom/script/sweep",
}

// Standard lists the packages of the standard library that scripts may import.
// Generic packages (cmp, iter, maps, slices) are supplied as source by the
// checker and do not appear here.
var Standard = []string{
	"bufio",
	"bytes",
	"container/heap",
	"container/list",
	"context",
	"encoding/csv",
	"encoding/json",
	"errors",
	"flag",
	"fmt",
	"io",
	"log",
	"math",
	"math/big",
	"math/bits",
	"math/cmplx",
	"math/rand",
	"math/rand/v2",
	"os",
	"os/signal",
	"path",
	"path/filepath",
	"regexp",
	"runtime",
	"sort",
	"strconv",
	"strings",
	"sync",
	"sync/atomic",
	"text/tabwriter",
	"time",
	"unicode",
	"unicode/utf8",
}
