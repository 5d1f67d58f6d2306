package semiempirical
import ("testing";"math";"fmt")
func TestScan(t *testing.T) {
  for _, acc := range []float64{1e-4,0.1} {
  for _, m := range molecules(t) {
    s := m.surface(t, acc)
    g := make([]float64, len(m.X))
    p, err := s.Gradient(t.Context(), g, m.coordinates())
    if err != nil { fmt.Println(m.Name, err); continue }
    var dg, dq float64
    for i := range g { dg = max(dg, math.Abs(g[i]-m.Gradient[i])) }
    for i := range p.Charges { dq = max(dq, math.Abs(p.Charges[i]-m.Charges[i])) }
    fmt.Printf("%-22s %3d it %3d (%d/%d) dE %9.2e dG %8.1e dq %8.1e %v\n", m.Name, len(m.Elements), p.Iterations, m.CyclesTight, m.CyclesDefault, p.Energy-m.Energy, dg, dq, p.Warnings)
    if math.Abs(p.Energy-m.Energy)>1e-8 && acc<1e-3 { for _, pp := range p.Parts { fmt.Println("   ", pp) }; fmt.Println(m.Parts) }
  }}
}
