//go:build glpk && cgo

package glpk

/*
#cgo LDFLAGS: -lglpk
#include <glpk.h>
#include <math.h>
#include <setjmp.h>

// GLPK answers a fatal error (no memory, say) by ending the process, unless a hook leaves by longjmp; then its
// environment, and every problem in it, may only be freed. No Go frame is ever jumped over.
static _Thread_local jmp_buf out;

static void leave(void *info) { longjmp(out, 1); }

static int bounds(double low, double high) {
	int l = isfinite(low), h = isfinite(high);
	if (!l && !h) return GLP_FR;
	if (!h) return GLP_LO;
	if (!l) return GLP_UP;
	return low == high ? GLP_FX : GLP_DB;
}

// load makes a problem of m rows and n columns; every array starts at index 1. NULL on a fatal error.
static glp_prob *load(int m, int n, int entries, const double *row_low, const double *row_high, const double *col_low,
		const double *col_high, const double *cost, const int *ia, const int *ja, const double *ar) {
	glp_error_hook(leave, NULL);
	if (setjmp(out)) return NULL;
	glp_prob *p = glp_create_prob();
	glp_set_obj_dir(p, GLP_MIN);
	if (m > 0) glp_add_rows(p, m);
	if (n > 0) glp_add_cols(p, n);
	for (int i = 1; i <= m; i++) glp_set_row_bnds(p, i, bounds(row_low[i], row_high[i]), row_low[i], row_high[i]);
	for (int j = 1; j <= n; j++) {
		glp_set_col_bnds(p, j, bounds(col_low[j], col_high[j]), col_low[j], col_high[j]);
		glp_set_obj_coef(p, j, cost[j]);
	}
	glp_load_matrix(p, entries, ia, ja, ar);
	glp_scale_prob(p, GLP_SF_GM | GLP_SF_EQ | GLP_SF_2N | GLP_SF_SKIP);
	glp_std_basis(p);
	glp_error_hook(NULL, NULL);
	return p;
}

#define FATAL (-1)

// run returns what glp_simplex returns, or FATAL; after that the problem must not be touched.
static int run(glp_prob *p, int method, int milliseconds, int pivots, double tolerance) {
	glp_smcp s;
	glp_init_smcp(&s);
	s.msg_lev = GLP_MSG_OFF;
	s.meth = method;
	s.tm_lim = milliseconds;
	s.it_lim = pivots;
	s.tol_bnd = tolerance;
	s.tol_dj = tolerance;
	glp_error_hook(leave, NULL);
	if (setjmp(out)) return FATAL;
	int code = glp_simplex(p, &s);
	glp_error_hook(NULL, NULL);
	return code;
}

static void fetch(glp_prob *p, double *x, double *pi) {
	for (int j = glp_get_num_cols(p); j >= 1; j--) x[j] = glp_get_col_prim(p, j);
	for (int i = glp_get_num_rows(p); i >= 1; i--) pi[i] = glp_get_row_dual(p, i);
}

static void limit_memory(int megabytes) { glp_mem_limit(megabytes); }
*/
import "C"

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime"
	"time"

	"boughwork/lp"
)

// Available reports whether this build has GLPK.
const Available = true

// slice is how long GLPK runs between two looks at the context.
const slice = 200 * time.Millisecond

// tolerance is GLPK's, on bounds and on reduced costs, in the model's units: an order below the record's 1e-8.
const tolerance = 1e-9

// nothing is a gap that is rounding, in units of the mean cost of the largest load: an objective of zero, where bars that
// stand already carry everything, has no relative gap.
const nothing = 1e-12

// What GLPK's own limits allow; beyond them it would end the process.
const (
	mostRows    = 100_000_000
	mostEntries = 500_000_000
)

// errMemory is what a fatal error of GLPK comes to: its inputs are valid, so it is memory.
var errMemory = errors.New("glpk: GLPK gave up, most likely for want of memory: solve with fewer bars or cases, or with the project's own solver")

// memoryLimit is the most that GLPK may take, in megabytes; 0 for no limit. A variable for the test of what happens then.
var memoryLimit = 0

// Solve implements lp.Solver.
func (Solver) Solve(ctx context.Context, p *lp.Problem, _ *lp.Start, set lp.Settings) (*lp.Solution, error) {
	set, err := set.WithDefaults()
	if err != nil {
		return nil, err
	}
	if err := p.Validate(); err != nil {
		return nil, err
	}
	// GLPK's tolerances are absolute: newtons, pascals and square metres side by side are more than they bear.
	p, scale := p.Scaled()
	set.Absolute /= scale.Force * scale.Cost
	// GLPK keeps its state in thread-local storage.
	runtime.LockOSThread()
	defer runtime.UnlockOSThread()
	C.glp_term_out(C.GLP_OFF)
	defer C.glp_free_env()
	if memoryLimit > 0 {
		C.limit_memory(C.int(memoryLimit))
	}

	m := newModel(p, false)
	o, err := solveModel(ctx, m, set, C.GLP_PRIMAL, 0)
	if err == nil && o.status == lp.Trouble {
		o, err = solveModel(ctx, m, set, C.GLP_DUALP, o.pivots)
	}
	if err != nil {
		return nil, err
	}
	if o.status == lp.NoEquilibrium {
		s, err := collapse(ctx, p, set, o.pivots)
		if err == nil {
			scale.Restore(s)
		}
		return s, err
	}
	s := blank(p)
	if o.x != nil {
		s = m.answer(o.x, o.pi)
	}
	s.Status, s.Iterations, s.Raw = o.status, o.pivots, o.status != lp.Optimal
	if s.Status == lp.Optimal && !set.Closed(s.Objective, s.Bound) && !(s.Objective-s.Bound <= nothing*m.cost) {
		s.Status = lp.Trouble
	}
	scale.Restore(s)
	return s, nil
}

// collapse finds the motion that the loads drive.
func collapse(ctx context.Context, p *lp.Problem, set lp.Settings, done int) (*lp.Solution, error) {
	m := newModel(p, true)
	o, err := solveModel(ctx, m, set, C.GLP_DUALP, done)
	if err != nil {
		return nil, err
	}
	s := blank(p)
	s.Status, s.Raw, s.Iterations = o.status, true, o.pivots
	if o.status != lp.Optimal {
		return s, nil
	}
	s.Status = lp.Trouble
	if u := m.ray(o.pi); u != nil {
		s.Status, s.Displacement, s.Bound = lp.NoEquilibrium, u, math.Inf(1)
	}
	return s, nil
}

func (m *model) fits() error {
	rows, cols, entries := len(m.rowLow)-1, len(m.colLow)-1, len(m.ar)-1
	if rows > mostRows || cols > mostRows || entries > mostEntries {
		return fmt.Errorf("glpk: %d rows, %d columns, %d entries: GLPK takes %d rows and columns and %d entries at most",
			rows, cols, entries, mostRows, mostEntries)
	}
	return nil
}

// outcome is what GLPK made of a model: columns x and row duals pi from index 1, nil if nothing was computed.
type outcome struct {
	status lp.Status
	x, pi  []float64
	pivots int
}

// solveModel runs the simplex method until it ends, the context ends or the limit on pivots is reached; done pivots were
// made before, and do not count.
func solveModel(ctx context.Context, m *model, set lp.Settings, method C.int, done int) (outcome, error) {
	o := outcome{status: lp.Cancelled, pivots: done}
	if ctx.Err() != nil {
		return o, nil
	}
	if err := m.fits(); err != nil {
		return o, err
	}
	rows, cols := len(m.rowLow)-1, len(m.colLow)-1
	prob := C.load(C.int(rows), C.int(cols), C.int(len(m.ar)-1), doubles(m.rowLow), doubles(m.rowHigh), doubles(m.colLow),
		doubles(m.colHigh), doubles(m.colCost), ints(m.ia), ints(m.ja), doubles(m.ar))
	if prob == nil {
		return o, errMemory
	}
	limit := min(set.Iterations*max(rows, 1), math.MaxInt32)
	if !o.run(ctx, m, prob, set, method, limit+done) {
		return o, errMemory // the environment is freed with all that is in it
	}
	o.x, o.pi = make([]float64, cols+1), make([]float64, rows+1)
	C.fetch(prob, doubles(o.x), doubles(o.pi))
	C.glp_delete_prob(prob)
	m.clamp(o.x)
	return o, nil
}

// run runs the method in slices until it ends, the context ends, or limit pivots are made. It returns false on a fatal
// error.
func (o *outcome) run(ctx context.Context, m *model, prob *C.glp_prob, set lp.Settings, method C.int, limit int) bool {
	for wait := slice; ; {
		left := limit - o.pivots
		before := int(C.glp_get_it_cnt(prob))
		code := C.run(prob, method, C.int(wait.Milliseconds()), C.int(left), tolerance)
		if code == C.FATAL {
			return false
		}
		made := int(C.glp_get_it_cnt(prob)) - before
		o.pivots += made
		o.status = ended(prob, code)
		if set.Progress != nil {
			set.Progress(lp.Iteration{Number: o.pivots, Objective: float64(C.glp_get_obj_val(prob)) * m.cost})
		}
		if code != C.GLP_ETMLIM || made >= left {
			return true
		}
		if ctx.Err() != nil {
			o.status = lp.Cancelled
			return true
		}
		if made == 0 && wait < 4*slice { // a slice must be long enough for a pivot
			wait *= 2
		}
	}
}

// ended maps the answer of glp_simplex to a status.
func ended(prob *C.glp_prob, code C.int) lp.Status {
	switch code {
	case 0:
	case C.GLP_ETMLIM, C.GLP_EITLIM:
		return lp.IterationLimit
	default:
		return lp.Trouble
	}
	switch C.glp_get_status(prob) {
	case C.GLP_OPT:
		return lp.Optimal
	case C.GLP_NOFEAS:
		return lp.NoEquilibrium
	case C.GLP_UNBND:
		return lp.Unbounded
	}
	return lp.Trouble
}

func doubles(x []float64) *C.double { return (*C.double)(&x[0]) }

func ints(x []int32) *C.int { return (*C.int)(&x[0]) }
