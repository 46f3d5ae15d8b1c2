# Writes reference.tsv: the check cases of package convert as R computes them,
# 17 significant digits. Base R only. Run in this folder: Rscript reference.R
# One line a case: its name, then its values; reference_test.go computes the same.

out <- file("reference.tsv", "w")
writeLines(paste("#", R.version.string, "on", format(Sys.Date()), "by reference.R; do not edit"), out)
put <- function(name, ...) writeLines(paste(c(name, sprintf("%.17g", as.numeric(c(...)))), collapse = "\t"), out)

# --- probabilities and quantiles, tails included ---
put("normal-tail", pnorm(c(-3, 0, 1, 1.959963984540054, 5, 9, 20, 37), lower.tail = FALSE))
put("normal-upper", qnorm(c(.5, .4, .1, .05, .025, .01, .005, .001, .0005, 1e-6, 1e-15, 1e-100, 1e-300, .975), lower.tail = FALSE))
for (df in c(1, 2, 2.5, 3, 7, 30, 123.4, 1e3, 1e5, 1e8))
  put(paste0("t-tail-", format(df, scientific = FALSE)), pt(c(.001, .1, .5, 1, 2, 5, 12, 40), df, lower.tail = FALSE))
for (df in c(1, 2, 2.5, 3, 7, 30, 123.4, 1e3, 1e5, 1e8))
  put(paste0("t-upper-", format(df, scientific = FALSE)), qt(c(.49, .25, .05, .025, .005, .0005, 1e-8, 1e-15), df, lower.tail = FALSE))

# --- A: mean with interval ---
sd_t <- function(l, u, n, lev = .95, df = n - 1) sqrt(n) * (u - l) / (2 * qt((1 + lev) / 2, df))
sd_z <- function(l, u, n, lev = .95) sqrt(n) * (u - l) / (2 * qnorm((1 + lev) / 2))
put("a1-handbook", sd_t(30.0, 34.2, 25), sd_t(26.5, 30.1, 22))
put("a1-handbook-t-divisors", 2 * qt(.975, c(24, 21)))
put("a1-handbook-z-divisors", 2 * qnorm(c(.95, .975, .995)))
put("a1-z", sd_z(30.0, 34.2, 25), sd_z(26.5, 30.1, 22))
put("a1-levels", sd_t(11.7, 13.9, 18, .90), sd_t(11.7, 13.9, 18, .95), sd_t(11.7, 13.9, 18, .99))
put("a1-extreme", sd_t(0, 1, 2, .999), sd_t(0, 1, 100000, .999), sd_t(0, 1, 2, .5))
put("a1-ehandbook-limits", 9.261460 + c(-1, 1) * qt(.975, 194) * 0.022789 / sqrt(195))
put("a1-ehandbook-se-t", 0.022789 / sqrt(195), qt(.975, 194))
put("a1-ehandbook-inverted", sd_t(9.258242 + c(5e-7, 0, -5e-7), 9.264679 + c(-5e-7, 0, 5e-7), 195))
put("a1-gardner-limits", 146.4 + c(-1, 1) * qt(.975, 99) * 18.5 / 10)
put("a1-gardner-inverted", sd_t(142.7 + c(.05, 0, -.05), 150.1 + c(-.05, 0, .05), 100))
put("a2-t-over-z", qt(.975, 9) / qnorm(.975), qt(.95, 9) / qnorm(.95), qt(.995, 9) / qnorm(.995))
put("a2-se", (34.2 - 30.0) / 2 / qt(.975, 24), (34.2 - 30.0) / 2 / qnorm(.975))
n_ci <- function(s, hs, l, u, h, lev = .95, N = 2:20000) {
  k <- sqrt(N) / qt((1 + lev) / 2, N - 1); W <- (u - l) / 2
  r <- N[k * (W - h) <= s + hs & k * (W + h) >= s - hs]; c(min(r), max(r))
}
put("a4-n", n_ci(5.09, .005, 30.0, 34.2, .05), n_ci(18.5, .05, 142.7, 150.1, .05))

# --- B: SE, t, F, p, difference ---
put("b1-ehandbook-se", 6.414700 / sqrt(249), 6.107710 / sqrt(79))
put("b1-sd", 0.4065151 * sqrt(249), 0.6871710 * sqrt(79), 1.37 * sqrt(25) + c(-1, 1) * .005 * sqrt(25))
sd_p <- function(d, p, n1, n2, sides = 2, df = n1 + n2 - 2) {
  t <- qt(1 - p / sides, df); se <- abs(d) / t; c(t, se, se / sqrt(1 / n1 + 1 / n2))
}
put("b2-handbook", sd_p(3.8, .008, 25, 22))
put("b2-handbook-rounded-se", 1.37 / sqrt(1 / 25 + 1 / 22))
put("b2-one-sided", sd_p(3.8, .008, 25, 22, sides = 1))
put("b2-second", sd_p(-2.4, .021, 14, 16))
sd_F <- function(d, F, n1, n2) abs(d) / sqrt(F) / sqrt(1 / n1 + 1 / n2)
put("b2-f", sd_F(3.8, 7.7284, 25, 22), sd_F(-2.4, 5.61, 14, 16))
sd_dci <- function(l, u, n1, n2, lev = .95) {
  q <- (1 + lev) / 2; k <- (u - l) / 2 / sqrt(1 / n1 + 1 / n2); c(k / qt(q, n1 + n2 - 2), k / qnorm(q))
}
put("b2-gardner-difference", sd_dci(1.15, 10.85, 100, 100)[1], sd_dci(1.1, 10.9, 100, 100)[1], sd_dci(1.05, 10.95, 100, 100)[1])
put("b2-gardner-pooled", sqrt((99 * 18.5^2 + 99 * 16.8^2) / 198) * c(1, sqrt(2 / 100)))
put("b2-gardner-test", 6 / 2.498980, 2 * pt(-6 / 2.498980, 198))
put("b2-difference-90", sd_dci(-0.4, 3.2, 21, 19, .90))
welchpool <- function(s1, n1, s2, n2) c(sqrt((s1^2 / n1 + s2^2 / n2) / (1 / n1 + 1 / n2)), sqrt(((n1 - 1) * s1^2 + (n2 - 1) * s2^2) / (n1 + n2 - 2)))
put("b2-welch-pooled", welchpool(6, 40, 3, 10), welchpool(6, 20, 3, 20))
sd_pr <- function(d, p, hp, n1, n2, hd = 0) c(sd_p(abs(d) - hd, p - hp, n1, n2)[3], sd_p(abs(d) + hd, p + hp, n1, n2)[3])
put("b3-rounded", sd_pr(3.8, .008, .0005, 25, 22, .05), sd_pr(3.8, .01, .005, 25, 22, .05))
put("b3-inequality", sd_p(3.8, .01, 25, 22)[3], sd_p(3.8, .05, 25, 22)[3])
sd_anova <- function(m, n, F) { M <- sum(n * m) / sum(n); sqrt(sum(n * (m - M)^2) / (length(m) - 1) / F) }
put("b4-plantgrowth", sd_anova(c(5.032, 4.661, 5.526), c(10, 10, 10), 4.846))
put("b4-four", sd_anova(c(12.1, 14.8, 13.0, 15.9), c(8, 9, 8, 10), 3.42))
r_ch <- function(s1, s2, sD) (s1^2 + s2^2 - sD^2) / (2 * s1 * s2)
put("b5-correlation", r_ch(6.4, 7.1, 4.5), r_ch(7.0, 6.9, 4.2))
put("b5-differences", 1.58 / 4.0621 * sqrt(10))
put("b5-sleep", with(sleep, { d <- extra[11:20] - extra[1:10]; c(mean(d) / (sd(d) / sqrt(10)), mean(d), sd(d) * sqrt(.9)) }))
put("b5-sleep-arms", with(sleep, tapply(extra, group, sd)) * sqrt(.9))
put("b5-sleep-interval", t.test(sleep$extra[1:10], sleep$extra[11:20], paired = TRUE)$conf.int)
put("b5-arm-sd", 4.5 / sqrt(2 * (1 - .78)), 4.5 / sqrt(2 * (1 - .5)))

# --- C: medians ---
xi <- function(n) 2 * qnorm((n - .375) / (n + .25)); eta <- function(n) 2 * qnorm((.75 * n - .125) / (n + .25))
hozo <- function(a, m, b, n) c(if (n <= 25) (a + 2 * m + b) / 4 else m, if (n <= 15) sqrt(((b - a)^2 + (a - 2 * m + b)^2 / 4) / 12) else (b - a) / (if (n <= 70) 4 else 6))
wan3 <- function(a, m, b, n) c((a + 2 * m + b) / 4, (b - a) / xi(n)); wanq <- function(q1, m, q3, n) c((q1 + m + q3) / 3, (q3 - q1) / eta(n))
wan5 <- function(a, q1, m, q3, b, n) c((a + 2 * q1 + 2 * m + 2 * q3 + b) / 8, ((b - a) / xi(n) + (q3 - q1) / eta(n)) / 2)
bland <- function(a, q1, m, q3, b, n) c(((n + 3) * (a + b) + 2 * (n - 1) * (q1 + m + q3)) / (8 * n), sqrt((a^2 + 2 * q1^2 + 2 * m^2 + 2 * q3^2 + b^2) / 16 + (a * q1 + q1 * m + m * q3 + q3 * b) / 8 - (a + 2 * q1 + 2 * m + 2 * q3 + b)^2 / 64))
luo3 <- function(a, m, b, n) { w <- 4 / (4 + n^.75); w * (a + b) / 2 + (1 - w) * m }
luoq <- function(q1, m, q3, n) { w <- .7 + .39 / n; w * (q1 + q3) / 2 + (1 - w) * m }
luo5 <- function(a, q1, m, q3, b, n) { w <- 2.2 / (2.2 + n^.75); v <- .7 - .72 / n^.55; w * (a + b) / 2 + v * (q1 + q3) / 2 + (1 - w - v) * m }
shi5 <- function(a, q1, m, q3, b, n) (b - a) / ((2 + .14 * n^.6) * qnorm((n - .375) / (n + .25))) + (q3 - q1) / ((2 + 2 / (.07 * n^.6)) * qnorm((.75 * n - .125) / (n + .25)))
put("c1-hozo", hozo(4, 12, 31, 12), hozo(4, 12, 31, 40), hozo(4, 12, 31, 90))
put("c2-wan-range", wan3(4, 12, 31, 40), wan3(50, 70, 101, 120))
put("c2-wan-quartiles", wanq(9, 12, 16, 40), wanq(62, 70, 79, 120))
put("c2-wan-five", wan5(4, 9, 12, 16, 31, 40), wan5(50, 62, 70, 79, 101, 120))
put("c3-bland", bland(4, 9, 12, 16, 31, 40), bland(50, 62, 70, 79, 101, 120))
put("c4-luo", luo3(4, 12, 31, 40), luo3(50, 70, 101, 120), luoq(9, 12, 16, 40), luoq(62, 70, 79, 120), luo5(4, 9, 12, 16, 31, 40), luo5(50, 62, 70, 79, 101, 120))
put("c4-shi", shi5(4, 9, 12, 16, 31, 40), shi5(50, 62, 70, 79, 101, 120))
Er <- function(n) integrate(function(x) 1 - pnorm(x)^n - (1 - pnorm(x))^n, -Inf, Inf, rel.tol = 1e-13, subdivisions = 5000)$value
put("c4-expected-range", sapply(c(2, 5, 10, 25, 50), Er))
put("c4-xi", xi(c(10, 25, 50)))
os <- function(r, n) integrate(function(z) z * dnorm(z) * exp(lfactorial(n) - lfactorial(r - 1) - lfactorial(n - r) + (r - 1) * pnorm(z, log.p = TRUE) + (n - r) * pnorm(-z, log.p = TRUE)), -Inf, Inf, rel.tol = 1e-12, subdivisions = 5000)$value
put("c4-expected-iqr", sapply(c(1, 2, 5, 10, 50), function(q) os(3 * q + 1, 4 * q + 1) - os(q + 1, 4 * q + 1)))
put("c4-iqr-large", 2 * qnorm(.75))
put("c4-widths", 7 / eta(40), 27 / xi(40))
skew3 <- function(a, m, b, n) c(abs(a + b - 2 * m) / (b - a), 1.01 / log(n + 9) + 2.43 / (n + 1)); skewq <- function(q1, m, q3, n) c(abs(q1 + q3 - 2 * m) / (q3 - q1), 2.66 / sqrt(n) - 5.92 / n^2)
skew5 <- function(a, q1, m, q3, b, n) c(max(2.65 * log(.6 * n) / sqrt(n) * abs(a + b - 2 * m) / (b - a), abs(q1 + q3 - 2 * m) / (q3 - q1)), 2.97 / sqrt(n) - 39.1 / n^3)
put("c6-skew", skew3(4, 12, 31, 40), skewq(9, 12, 16, 40), skew5(4, 9, 12, 16, 31, 40))
put("c6-no-skew", skew3(50, 70, 101, 120), skewq(62, 70, 79, 120), skew5(50, 62, 70, 79, 101, 120))
logq <- function(q1, m, q3, n) { q <- log(c(q1, m, q3)); M <- luoq(q[1], q[2], q[3], n); s <- (q[3] - q[1]) / eta(n); c(exp(M + s^2 / 2), exp(M + s^2 / 2) * sqrt(exp(s^2) - 1)) }
put("c7-log", logq(3.1, 5.2, 9.4, 60), logq(0.8, 1.9, 4.1, 25))
# Least squares of lognormal quantiles: the scale is linear, the shape solves the derivative.
qln <- function(q, p) {
  z <- qnorm(p); A <- function(s) sum(q * exp(s * z)) / sum(exp(2 * s * z))
  g <- function(s) sum((A(s) * exp(s * z) - q) * z * exp(s * z))
  s <- uniroot(g, c(.05, 3), tol = 1e-15)$root; m <- A(s) * exp(s^2 / 2); c(m, m * sqrt(exp(s^2) - 1))
}
put("c7-quantile-estimation", qln(c(3.1, 5.2, 9.4), c(.25, .5, .75)), qln(c(0.8, 1.9, 4.1), c(.25, .5, .75)))
# Least squares of beta quantiles between 0 and 1, by repeated searches.
qbe <- function(q, p) {
  t <- c(0, 0); for (i in 1:12) t <- optim(t, function(t) sum((qbeta(p, exp(t[1]), exp(t[2])) - q)^2), control = list(reltol = 1e-16, abstol = 0, maxit = 5000))$par
  a <- exp(t[1]); b <- exp(t[2]); c(a / (a + b), sqrt(a * b / (a + b + 1)) / (a + b))
}
put("c7-beta", qbe(c(.31, .52, .64), c(.25, .5, .75)), qbe(c(.02, .11, .19, .34, .71), c(1 / 40, .25, .5, .75, 39 / 40)))
bcpow <- function(a, m, b) uniroot(function(k) { f <- function(x) if (abs(k) < 1e-9) log(x) else (x^k - 1) / k; f(a) + f(b) - 2 * f(m) }, c(-3, 3), tol = 1e-15)$root
put("c7-box-cox-power", bcpow(3.1, 5.2, 9.4), bcpow(0.8, 1.9, 4.1))

# --- D: ratios, proportions, rates ---
lse <- function(l, u, lev = .95) log(u / l) / (2 * qnorm((1 + lev) / 2))
put("d1-altman", lse(.70, .94), 2 * pnorm(log(.81) / lse(.70, .94)))
put("d1-altman-p", 17 + c(-1, 1) * 1.96 * 17 / (-0.862 + sqrt(.743 - 2.404 * log(.032))))
put("d1-levels", lse(1.12, 2.35), lse(1.12, 2.35, .90), lse(1.12, 2.35, .99), sqrt(1.12 * 2.35))
put("d1-percent", lse(1 - .47, 1 - .12), sqrt((1 - .47) * (1 - .12)))
put("d1-hayfever", 141 * 13525 / (420 * 928), sqrt(1 / 141 + 1 / 420 + 1 / 928 + 1 / 13525), exp(log(141 * 13525 / (420 * 928)) + c(-1, 1) * 1.96 * sqrt(1 / 141 + 1 / 420 + 1 / 928 + 1 / 13525)))
put("d2-first", sqrt(1 / 24 - 1 / 110 + 1 / 39 - 1 / 108), sqrt(1 / 24 + 1 / 39), 1 / sqrt(118 / 4), abs(log(.72)) / qnorm(1 - .031 / 2))
put("d2-second", sqrt(1 / 7 - 1 / 60 + 1 / 15 - 1 / 58), sqrt(1 / 7 + 1 / 53 + 1 / 15 + 1 / 43), sqrt(1 / 11 + 1 / 5), 1 / sqrt(63 * 2 * 1 / 9), log(1.48) / qnorm(1 - .009 / 2))
z95 <- qnorm(.975)
ci <- list(wald = function(x, n, p = x / n) p + c(-1, 1) * z95 * sqrt(p * (1 - p) / n),
  wilson = function(x, n, p = x / n) (p + z95^2 / 2 / n + c(-1, 1) * z95 * sqrt(p * (1 - p) / n + z95^2 / 4 / n^2)) / (1 + z95^2 / n),
  exact = function(x, n) c(if (x == 0) 0 else qbeta(.025, x, n - x + 1), if (x == n) 1 else qbeta(.975, x + 1, n - x)),
  waldcc = function(x, n, p = x / n) p + c(-1, 1) * (z95 * sqrt(p * (1 - p) / n) + .5 / n),
  wilsoncc = function(x, n) suppressWarnings(prop.test(x, n)$conf.int[1:2]),
  logit = function(x, n) plogis(qlogis(x / n) + c(-1, 1) * z95 * sqrt(1 / x + 1 / (n - x))),
  agresti = function(x, n, m = n + z95^2, q = (x + z95^2 / 2) / m) q + c(-1, 1) * z95 * sqrt(q * (1 - q) / m),
  jeffreys = function(x, n) qbeta(c(.025, .975), x + .5, n - x + .5))
for (k in names(ci)) put(paste0("d3-", k), ci[[k]](81, 263), ci[[k]](15, 148), ci[[k]](1, 29), ci[[k]](39, 40))
put("d3-logit-se", (qlogis(.148) - qlogis(.045)) / (2 * qnorm(.975)), (qlogis(.366) - qlogis(.255)) / (2 * qnorm(.95)))
put("d3-zero", ci$exact(0, 20), ci$wilson(0, 20)[2], ci$exact(20, 20))
put("d3-sd-binary", sd(c(rep(1, 9), rep(0, 31))))
rec <- function(p, l, u, d, N, meth = c("wald", "wilson", "exact")) {
  which_ci <- function(x, n) names(Filter(function(f) { v <- round(100 * pmin(pmax(f(x, n), 0), 1), 10); all(!is.na(v)) && all(abs(v - c(l, u)) <= .5 * 10^-d + 1e-9) }, ci))
  r <- NULL
  for (n in N) for (x in which(abs(100 * (0:n) / n - p) <= .5 * 10^-d + 1e-9) - 1) { k <- intersect(which_ci(x, n), meth); if (length(k)) r <- c(r, x, n) }
  r
}
put("d4-one-decimal", rec(30.8, 25.5, 36.6, 1, 2:2000))
put("d4-wald", rec(22.5, 9.6, 35.4, 1, 2:2000))
put("d4-whole-percents", length(rec(31, 25, 37, 0, 2:2000)) / 2)
pois <- function(x) c(qchisq(.025, 2 * x) / 2, qchisq(.975, 2 * x + 2) / 2)
put("d5-poisson", pois(0), pois(1), pois(5), pois(10), pois(20), pois(100))
x_pois <- function(l, u) c((2 * z95 / log(u / l))^2, uniroot(function(x) log(pois(x)[2] / pois(x)[1]) - log(u / l), c(.5, 1e5), tol = 1e-13)$root)
put("d5-count", x_pois(3.2, 7.3), x_pois(3.15, 7.35), x_pois(3.25, 7.25))
put("d5-count-known", x_pois(4.795389, 18.390356), x_pois(10 * exp(-z95 / sqrt(10)), 10 * exp(z95 / sqrt(10))))

# --- E: logarithms ---
ls_ci <- function(l, u, n, lev = .95) sqrt(n) * log(u / l) / (2 * qt((1 + lev) / 2, n - 1)); ln2raw <- function(gm, s) c(gm * exp(s^2 / 2), gm * exp(s^2 / 2) * sqrt(exp(s^2) - 1)); raw2ln <- function(m, s) c(m / sqrt(1 + (s / m)^2), sqrt(log(1 + (s / m)^2)))
put("e1-interval", ls_ci(8.1, 12.4, 30), sqrt(8.1 * 12.4), exp(ls_ci(8.1, 12.4, 30)), ln2raw(10.02, ls_ci(8.1, 12.4, 30)))
put("e1-interval-90", ls_ci(1.35, 1.72, 24, .90), sqrt(1.35 * 1.72), ln2raw(1.52, log(1.61)))
put("e1-cv", sqrt(log(1 + c(.10, .25, .40, .80)^2)))
put("e1-ratio-of-means", sd_dci(log(1.05), log(1.62), 24, 22), sd_dci(log(.71), log(.98), 40, 41, .90))
put("e2-there-and-back", raw2ln(12.0, 8.5), ln2raw(raw2ln(12, 8.5)[1], raw2ln(12, 8.5)[2]))

# --- F: groups, change, ranges, comparisons ---
comb <- function(n, m, s) { N <- sum(n); M <- sum(n * m) / N; c(N, M, sqrt((sum((n - 1) * s^2) + sum(n * (m - M)^2)) / (N - 1))) }
drop1 <- function(N, M, S, n, m, s) { k <- N - n; q <- (N * M - n * m) / k; c(k, q, sqrt(((N - 1) * S^2 - (n - 1) * s^2 - n * (m - M)^2 - k * (q - M)^2) / (k - 1))) }
g <- split(PlantGrowth$weight, PlantGrowth$group)
put("f1-plantgrowth-parts", lengths(g), sapply(g, mean), sapply(g, sd))
put("f1-plantgrowth", comb(lengths(g), sapply(g, mean), sapply(g, sd)), mean(unlist(g)), sd(unlist(g)))
put("f1-two", comb(c(18, 25), c(42.3, 47.9), c(8.1, 9.6)))
put("f2-rest", drop1(43, 45.5558140, 9.32916069, 18, 42.3, 8.1), drop1(30, 5.073, .70119, 10, 5.526, .44257))
chg <- function(s0, s1, r) sqrt(s0^2 + s1^2 - 2 * r * s0 * s1)
put("f3-change", chg(6.4, 7.1, .78), chg(7.0, 6.9, .82), chg(5.2, 5.9, c(.3, .5, .7)))
fin <- function(s0, sD, r) Filter(function(x) x > 0, r * s0 + c(-1, 1) * sqrt(sD^2 - s0^2 * (1 - r^2)))
put("f3-final", fin(6.4, 4.5, .78), fin(5, 6, .3), fin(6.4, 4.1, .78))
put("f5-d2", sapply(2:25, Er))
d3 <- function(n) sqrt(integrate(function(r) sapply(r, function(r) 2 * r * (1 - n * integrate(function(x) dnorm(x) * (pnorm(x + r) - pnorm(x))^(n - 1), -Inf, Inf, rel.tol = 1e-12)$value)), 0, Inf, rel.tol = 1e-11)$value - Er(n)^2)
put("f5-d3", sapply(c(2, 3, 4, 5, 10, 15, 20, 25), d3))
put("f4-f5-range", 14.2 / Er(8), 3.7 / Er(5), d3(8) / Er(8), 14.2 / sqrt(14), 14.2 / 2 * sqrt(8 / 7), 3.7 / sqrt(8), 3.7 / 2 * sqrt(6 / 5))
welch <- function(m1, s1, n1, m2, s2, n2) { a <- s1^2 / n1; b <- s2^2 / n2; d <- m1 - m2; f <- (a + b)^2 / (a^2 / (n1 - 1) + b^2 / (n2 - 1)); e <- sqrt(a + b); c(d, e, f, d / e, 2 * pt(-abs(d / e), f), d - qt(.975, f) * e, d + qt(.975, f) * e) }
put("f6-ehandbook", welch(20.14458, 6.414700, 249, 30.48101, 6.107710, 79))
put("f6-ehandbook-pooled", { sp <- sqrt((248 * 6.414700^2 + 78 * 6.107710^2) / 326); c(sp, (20.14458 - 30.48101) / sp / sqrt(1 / 249 + 1 / 79)) })
put("f6-sleep", with(sleep, welch(mean(extra[1:10]), sd(extra[1:10]), 10, mean(extra[11:20]), sd(extra[11:20]), 10)))
put("f6-invented", welch(24.6, 3.1, 30, 22.8, 3.4, 28))
J <- function(nu) exp(lgamma(nu / 2) - lgamma((nu - 1) / 2)) / sqrt(nu / 2)
put("f7-j", J(c(2, 3, 4, 5, 6, 7, 8, 9, 10, 20, 50)), 1 - 3 / (4 * 10 - 1))
hedges <- function(m1, s1, n1, m2, s2, n2) { nu <- n1 + n2 - 2; d <- (m1 - m2) / sqrt(((n1 - 1) * s1^2 + (n2 - 1) * s2^2) / nu); j <- J(nu); g <- j * d; q <- n1 * n2 / (n1 + n2); c(d, g, (1 - 3 / (4 * nu - 1)) * d, j * sqrt(1 / q + d^2 / (2 * (n1 + n2))), sqrt(1 / q + g^2 / (2 * (n1 + n2 - 3.94))), sqrt(j^2 * nu / (nu - 2) / q * (1 + q * g^2) - g^2)) }
put("f7-borenstein", hedges(103, 5.5, 50, 100, 4.5, 50))
put("f7-invented", hedges(14.1, 3.9, 9, 10.2, 4.4, 8))

# --- G: rounding ---
wr <- function(l, u, h, m = NA, hm = h, f = identity) { L <- f(l + c(-h, h)); U <- f(u + c(-h, h)); M <- if (is.na(m)) c(-Inf, Inf) else f(m + c(-hm, hm)); c(max((U[1] - L[2]) / 2, U[1] - M[2], M[1] - L[2], 0), min((U[2] - L[1]) / 2, U[2] - M[1], M[2] - L[1])) }
sdr <- function(n, ..., lev = .95) sqrt(n) / qt((1 + lev) / 2, n - 1) * wr(...); dig <- function(r) ceiling(-log10(r[2] - r[1]))
put("g-sd", sdr(25, 30.0, 34.2, .05), sdr(25, 30.0, 34.2, .05, 32.1), dig(sdr(25, 30.0, 34.2, .05)))
put("g-sd-finer-mean", sdr(25, 30.0, 34.2, .05, 32.07, .005), sdr(25, 30.0, 34.2, .05, 32.14, .005), dig(sdr(25, 30.0, 34.2, .05, 32.14, .005)))
put("g-ehandbook", sdr(195, 9.258242, 9.264679, 5e-7, 9.261460), sdr(22, 26.5, 30.1, .05, 28.3))
put("g-log", c(wr(1.12, 2.35, .005, f = log), wr(1.12, 2.35, .005, 1.62, .005, f = log)) / z95)
put("g-log-coarse", c(wr(0.5, 0.9, .05, f = log), wr(0.5, 0.9, .05, .69, .005, f = log)) / z95)

# --- H: unexplained plus-minus ---
rd <- function(x, n, lev = .95) c(x, x * sqrt(n), x * sqrt(n) / qt((1 + lev) / 2, n - 1))
h1 <- function(m1, x1, n1, m2, x2, n2, hm, hx) {
  P <- function(d, a, b) { v <- a^2 / n1 + b^2 / n2; sp <- ((n1 - 1) * a^2 + (n2 - 1) * b^2) / (n1 + n2 - 2) * (1 / n1 + 1 / n2); rbind(2 * pt(-d / sqrt(sp), n1 + n2 - 2), 2 * pt(-d / sqrt(v), v^2 / (a^4 / n1^2 / (n1 - 1) + b^4 / n2^2 / (n2 - 1)))) }
  d <- abs(m1 - m2); c(rbind(apply(P(d + 2 * hm, rd(x1 - hx, n1), rd(x2 - hx, n2)), 2, min), apply(P(max(d - 2 * hm, 0), rd(x1 + hx, n1), rd(x2 + hx, n2)), 2, max)))
}
put("h1-sd", h1(24.6, 3.1, 30, 22.8, 3.4, 28, .05, .05))
put("h1-se", h1(118.3, 2.4, 36, 125.9, 2.6, 35, .05, .05))
put("h1-ci", h1(52.4, 3.3, 40, 47.1, 3.1, 38, .05, .05))
put("h1-undecided", h1(14.2, 1.5, 6, 12.0, 1.7, 6, .05, .05))
put("h1-tiny", h1(9.8, .4, 12, 6.1, .5, 12, .05, .05))
lcv <- function(m, x, n, cv) { y <- log(cv); k <- length(y); s <- sd(y) * sqrt(1 + 1 / k); dt((log(rd(x, n) / m) - mean(y)) / s, k - 1, log = TRUE) }
put("h2-cv", lcv(50.2, 2.1, 30, c(.21, .25, .19, .28, .23)), lcv(50.2, 9.0, 4, c(.15, .35, .22, .48, .27)))
smax <- function(m, A, B, n) sqrt(n / (n - 1) * (m - A) * (B - m)); smin <- function(m, a, b, n) sqrt(((m - a)^2 + (b - m)^2 + (2 * m - a - b)^2 / (n - 2)) / (n - 1))
put("h3-scale", smax(8.05, 0, 10, 40), rd(.85, 40))
put("h3-extremes", smin(40.2, 21, 64, 30), smax(40.2, 21, 64, 30), rd(1.9, 30))
grim <- function(m, n, d, k = 1) any(abs(round(m * n * k + (-2:2)) / (n * k) - m) <= .5 * 10^-d + 1e-9)
put("h4-mean", grim(5.19, 28, 2), grim(5.18, 28, 2), grim(3.47, 15, 2), grim(3.45, 15, 2))
att <- function(n, v) Reduce(function(s, i) unique(c(outer(s, v + 1i * v^2, "+"))), 1:n, 0 + 0i)
onscale <- function(A, m, x, n, h = .005) sapply(1:3, function(k) { v <- sqrt(pmax((Im(A) - Re(A)^2 / n) / (n - 1), 0)); any(abs(Re(A) / n - m) <= h + 1e-9 & v >= rd(x - h, n)[k] - 1e-9 & v <= rd(x + h, n)[k] + 1e-9) })
put("h4-on-scale", onscale(att(15, 1:5), 2.93, 1.10, 15), onscale(att(15, 1:5), 2.93, .28, 15), onscale(att(15, 1:5), 2.93, .61, 15), onscale(att(17, 1:5), 2.82, .64, 17), onscale(att(8, 1:5), 3.00, .76, 8))
lns <- function(x, n, om = .15) { w <- 1 / (1 / (2 * (n - 1)) + om^2); sapply(list(0, .5 * log(n), .5 * log(n) - log(qt(.975, n - 1))), function(k) { y <- log(x) + k; -.5 * sum(w * (y - sum(w * y) / sum(w))^2) }) }
put("h5-sizes", lns(c(2.6, 1.3, .8), c(12, 50, 140)), lns(c(8.1, 8.9, 7.7), c(12, 50, 140)), lns(c(1.9, 2.1, 2.0), c(20, 22, 19)))

# --- I: plausibility ---
scales <- function(m, l, u, h, hm = h) sapply(c(identity, log, qlogis), function(f) { w <- suppressWarnings(wr(l, u, h, m, hm, f)); !anyNA(w) && w[1] <= w[2] })
put("i2-scales", scales(1.62, 1.12, 2.35, .005), scales(.083, .045, .148, .0005), scales(12.8, 8.7, 16.9, .05), scales(1.51, 1.42, 1.61, .005), scales(.30, .21, .47, .005))
se_as_sd <- function(s1, n1, s2, n2) { v <- 1 / (2 * (n1 - 1)) + 1 / (2 * (n2 - 1)) + .15^2; a <- abs(log(s1 / s2)); b <- .5 * log(if (s1 < s2) n1 else n2); (a^2 - (a - b)^2) / (2 * v) }
put("i4-se-as-sd", se_as_sd(1.4, 40, 8.6, 38), se_as_sd(7.1, 40, 8.6, 38), se_as_sd(4.8, 5, 8.6, 6))
lvl <- function(d, hd, l, u, h, p, hp, df) { d <- abs(d); W <- (u - l) / 2; 2 * pt(c((W - h) / (d + hd) * qt(1 - (p + hp) / 2, df), (W + h) / (d - hd) * qt(1 - (p - hp) / 2, df)), df) - 1 }
put("i5-level", 100 * lvl(4.2, .05, .9, 7.5, .05, .013, .0005, 78), 100 * lvl(4.2, .05, 1.4, 7.0, .05, .013, .0005, 78))
n_se <- function(s, hs, se, he) c(((s - hs) / (se + he))^2, ((s + hs) / (se - he))^2)
put("i7-n", n_se(8.6, .05, 1.39, .005), n_se(12.4, .05, 2.1, .05))
put("i6-one-sided", (12.8 - 11.2) / qt(.95, 29), (7.4 - 6.1) / qt(.975, 18))
df_tp <- function(t, ht, p, hp, N = 1:2000) { r <- N[2 * pt(-t - ht, N) <= p + hp & 2 * pt(-t + ht, N) >= p - hp]; if (length(r)) range(r) else c(0, 0) }
put("i8-df", df_tp(2.31, .005, .033, .0005), df_tp(2.31, .005, .024, .0005), df_tp(2.31, .005, .018, .0005))

# --- J: the t table ---
for (df in c(1:40, 50, 60, 80, 100, 120, Inf)) put(paste0("j-t-", df), qt(c(.95, .975, .995), df))
put("j-normal", qnorm(c(.90, .95, .975, .99, .995, .999, .9995)))
put("j-t-999", qt(.999, 1:12))

# --- K: raw data of base R ---
data_sets <- list(
  toothgrowth_oj = with(ToothGrowth, len[supp == "OJ" & dose == .5]), toothgrowth_vc = with(ToothGrowth, len[supp == "VC" & dose == 2]),
  plantgrowth_ctrl = with(PlantGrowth, weight[group == "ctrl"]), plantgrowth_trt1 = with(PlantGrowth, weight[group == "trt1"]), plantgrowth_trt2 = with(PlantGrowth, weight[group == "trt2"]),
  chickwts_casein = with(chickwts, weight[feed == "casein"]), chickwts_horsebean = with(chickwts, weight[feed == "horsebean"]),
  iris_setosa = with(iris, Sepal.Length[Species == "setosa"]), iris_virginica = with(iris, Petal.Length[Species == "virginica"]),
  insectsprays_a = with(InsectSprays, count[spray == "A"]), insectsprays_c = with(InsectSprays, count[spray == "C"]),
  sleep_1 = with(sleep, extra[group == 1]), sleep_2 = with(sleep, extra[group == 2]),
  warpbreaks_al = with(warpbreaks, breaks[wool == "A" & tension == "L"]), co2_quebec_chilled = with(CO2, uptake[Type == "Quebec" & Treatment == "chilled"]),
  morley_1 = with(morley, Speed[Expt == 1]), trees_volume = trees$Volume, women_height = women$height,
  mtcars_manual = with(mtcars, mpg[am == 1]), airquality_may = with(airquality, as.numeric(na.omit(Ozone[Month == 5]))))
for (k in names(data_sets)) {
  x <- data_sets[[k]]; n <- length(x); e <- sd(x) / sqrt(n); q <- quantile(x, type = 7)
  put(paste0("k-", k), n, mean(x), sd(x), e, mean(x) + c(-1, 1) * qt(.975, n - 1) * e, q, luo5(q[1], q[2], q[3], q[4], q[5], n), shi5(q[1], q[2], q[3], q[4], q[5], n))
}
put("k-morley-all", mean(morley$Speed) / 1000 + 299, sd(morley$Speed) / 1000)
close(out)
