# Of about UNITS: awk -v units=N -v way=WAY -f typed.awk.  WAY is flows or gas, a line of units each
# with a side stream, every stream metered within its uncertainty, whole flows or with analyses; or
# known, rings of three units whose feeds, recoveries and shares are all known; or spare, where a
# third of the rings has a share twice.
function rings(count,   r, i, c) {
  split("CH4 CO2 N2 H2 O2 Ar", c)
  print "balance line"
  print "components CH4, CO2, N2, H2, O2, Ar"
  for (r = 1; r <= count; r++) {
    printf "mix m%d: t%d + b%d + f%d = i%d\nseparate s%d: i%d = t%d + r%d\nsplit p%d: r%d = b%d + w%d\n",
      r, r - 1, r, r, r, r, r, r, r, r, r, r, r
    for (i = 1; i <= 6; i++) printf "known %s of t%d = %d %% of %s of i%d\n", c[i], r, 20 + 10 * i, c[i], r
    printf "known b%d = 60 %% of r%d\n", r, r
    if (way == "spare" && r % 3 == 0) printf "known w%d = 40 %% of r%d\n", r, r
    printf "known f%d = %d kmol/h of (CH4 1, CO2 2, N2 3, H2 4, O2 5, Ar 6 mol)\n", r, 10 + r % 7
  }
  print "known t0 = 100 kmol/h of (CH4 1, CO2 2, N2 3, H2 4, O2 5, Ar 6 mol)"
  print "end"; print "solve line"
}
function metered(name, f, c, n,   i, t) {
  t = 0
  for (i = 1; i <= n; i++) t += f[i]
  printf "known %s = %.6g +/- %.6g kmol/h\n", name, t * (1 + 0.01 * (rand() - 0.5)), 0.01 * t
  for (i = 1; i < n; i++)
    printf "known %s of %s = %.6g +/- %.4g mol%%\n", c[i], name,
      100 * f[i] / t * (1 + 0.004 * (rand() - 0.5)), 0.4 * f[i] / t
}
BEGIN {
  if (way == "known" || way == "spare") { rings(int(units / 3)); exit }
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
