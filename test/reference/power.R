# Sizes and exaggeration for test/stats. Made with R 4.2.2:
#   Rscript test/reference/power.R > test/reference/power.json
# means: power.t.test; shares: power.prop.test with tol = 1e-12, whose standard error is pooled under no difference; ours is
# not. exaggeration: the mean of |estimate| beyond the critical value by numerical integration of its density.

text <- function(x) sprintf("\"%.14g\"", x)
named <- function(...) { x <- list(...); paste0("{", paste0("\"", names(x), "\": ", unlist(x), collapse = ", "), "}") }
listed <- function(x) paste0("[\n", paste(x, collapse = ",\n"), "\n]")

mean_row <- function(delta, sd, alpha, power) named(
  delta = delta, sd = sd, alpha = alpha, power = power,
  n = text(power.t.test(delta = delta, sd = sd, sig.level = alpha, power = power, tol = 1e-12)$n)
)
share_row <- function(p1, p2, alpha, power) named(
  control = p1, variant = p2, alpha = alpha, power = power,
  n = text(power.prop.test(p1 = p1, p2 = p2, sig.level = alpha, power = power, tol = 1e-12)$n)
)
exaggeration_row <- function(effect, se, alpha) {
  c <- qnorm(1 - alpha / 2)
  d <- effect / se
  size <- function(x) abs(x) * dnorm(x, d)
  above <- integrate(size, c, d + 40, rel.tol = 1e-12, subdivisions = 1000)$value
  below <- integrate(size, min(-c, d) - 40, -c, rel.tol = 1e-12, subdivisions = 1000)$value
  power <- pnorm(c, d, lower.tail = FALSE) + pnorm(-c, d)
  named(effect = effect, standardError = se, alpha = alpha, power = text(power), wrongSign = text(pnorm(-c, d) / power),
        factor = text((above + below) / power / d))
}
cat(named(
  means = listed(c(mean_row(1, 1, 0.05, 0.9), mean_row(5, 10, 0.05, 0.8), mean_row(0.02, 1, 0.05, 0.8), mean_row(3, 7, 0.01, 0.95), mean_row(1, 20, 0.1, 0.5))),
  shares = listed(c(share_row(0.5, 0.75, 0.05, 0.9), share_row(0.65, 0.85, 0.05, 0.8), share_row(0.12, 0.126, 0.05, 0.8), share_row(0.001, 0.0013, 0.01, 0.9), share_row(0.9, 0.85, 0.1, 0.7))),
  exaggeration = listed(c(exaggeration_row(0.1, 3.28, 0.05), exaggeration_row(2, 8.1, 0.05), exaggeration_row(1, 1, 0.05), exaggeration_row(2.8, 1, 0.05), exaggeration_row(6, 1, 0.01), exaggeration_row(0.5, 0.01, 0.05), exaggeration_row(1e-3, 1, 0.2)))
), "\n")
