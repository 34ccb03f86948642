package gas

import "gonum.org/v1/gonum/integrate/quad"

// legendre are the nodes and weights of the Gauss-Legendre rule on 0 to 1.
var legendre = gaussLegendre(20)

type rule struct{ nodes, weights []float64 }

func gaussLegendre(n int) rule {
	r := rule{make([]float64, n), make([]float64, n)}
	quad.Legendre{}.FixedLocations(r.nodes, r.weights, 0, 1)
	return r
}
