// Package uncertainty evaluates and combines measurement uncertainty as JCGM 100:2008 (the GUM) and its supplement JCGM 101:2008 do.
//
// A result y = f(x1, x2, …) has a [Budget]: one [Contribution] for each input, with its standard uncertainty u, its sensitivity c = ∂f/∂x
// and its degrees of freedom ν. The combined standard uncertainty is the root of
//
//	uc² = Σ (ci·ui)² + 2 Σ ci·cj·r(i,j)·ui·uj        (JCGM 100, 5.1.2 and 5.2.2)
//
// and an expanded one is U = k·uc, k from Student's t with the effective degrees of freedom (JCGM 100, G.4).
//
// It knows no meters and no parts: numbers go in, numbers come out. Nothing here panics; what is undefined is NaN.
package uncertainty
