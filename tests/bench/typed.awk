# A line of UNITS, each with a side stream, every stream metered within its uncertainty:
# whole flows, or with analyses (way=gas).  awk -v units=N -v way=flows -f typed.awk
function metered(name, f, c, n,   i, t) {
  t = 0
  for (i = 1; i <= n; i++) t += f[i]
  printf "known %s = %.6g +/- %.6g kmol/h\n", name, t * (1 + 0.01 * (rand() - 0.5)), 0.01 * t
  for (i = 1; i < n; i++)
    printf "known %s of %s = %.6g +/- %.4g mol%%\n", c[i], name,
      100 * f[i] / t * (1 + 0.004 * (rand() - 0.5)), 0.4 * f[i] / t
}
BEGIN {
  srand(4)
  n = split(way == "gas" ? "CH4 CO2 N2 H2 O2 Ar" : "CH4", c)
  for (i = 1; i <= n; i++) main[i] = (40 * units + 1000) / i
  print "balance line"
  for (u = 1; u <= units; u++) printf "separate u%d: m%d = s%d + m%d\n", u, u - 1, u, u
  if (way == "gas") print "components CH4, CO2, N2, H2, O2, Ar"
  metered("m0", main, c, n)
  for (u = 1; u <= units; u++) {
    for (i = 1; i <= n; i++) { side[i] = (10 + 20 * rand()) / i; main[i] -= side[i] }
    metered("s" u, side, c, n); metered("m" u, main, c, n)
  }
  print "end"; print "solve line"
}
