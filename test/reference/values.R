# Values from R for test/stats. Made with R 4.2.2 and boot 1.3-28.1:
#   Rscript test/reference/values.R > test/reference/values.json
# The methods that R lacks are written from their definition and solved by root finding, not by the closed forms under test.

text <- function(x) sprintf("\"%.16g\"", x)
named <- function(...) {
  x <- list(...)
  paste0("{", paste0("\"", names(x), "\": ", unlist(x), collapse = ", "), "}")
}
listed <- function(x) paste0("[", paste(x, collapse = ", "), "]")
root <- function(f, low, high) uniroot(f, c(low, high), tol = 1e-16, maxiter = 10000)$root

# Welch: t.test. Fieller with its quantile: the r at which the t statistic of variant - r control is the quantile.
welch <- function(control, variant, conf) {
  test <- t.test(variant, control, conf.level = conf)
  q <- qt((1 + conf) / 2, test$parameter)
  vc <- var(control) / length(control)
  vt <- var(variant) / length(variant)
  gap <- function(r) (mean(variant) - r * mean(control)) / sqrt(vt + r^2 * vc)
  r <- mean(variant) / mean(control)
  bounded <- mean(control) > q * sqrt(vc)
  named(
    control = listed(control), variant = listed(variant), confidence = conf,
    t = text(test$statistic), df = text(test$parameter), p = text(test$p.value), standardError = text(test$stderr),
    low = text(test$conf.int[1]), high = text(test$conf.int[2]),
    relativeLow = if (bounded) text(root(function(x) gap(x) - q, -1e4, r) - 1) else "null",
    relativeHigh = if (bounded) text(root(function(x) gap(x) + q, r, 1e4) - 1) else "null"
  )
}

# Two shares: Wilson limits by prop.test, Newcombe's square-and-add and MOVER's ratio from them.
wilson <- function(x, n, conf) prop.test(x, n, conf.level = conf, correct = FALSE)$conf.int[1:2]
shares <- function(xc, nc, xt, nt, conf) {
  suppressWarnings({
    c <- wilson(xc, nc, conf)
    t <- wilson(xt, nt, conf)
  })
  pc <- xc / nc
  pt <- xt / nt
  limits <- function(z, x, n) {
    s <- function(p0) (x / n - p0)^2 * n - z^2 * p0 * (1 - p0)
    p <- x / n
    edge <- z^2 / (n + z^2) # n p0^2 = z^2 p0 (1 - p0) where no unit has the event
    if (p == 0) c(0, edge) else if (p == 1) c(1 - edge, 1) else c(root(s, 0, p), root(s, p, 1))
  }
  touch <- function(z) {
    lc <- limits(z, xc, nc)
    lt <- limits(z, xt, nt)
    if (pt > pc) (pt - lt[1])^2 + (lc[2] - pc)^2 - (pt - pc)^2 else (lt[2] - pt)^2 + (pc - lc[1])^2 - (pt - pc)^2
  }
  p <- if (pt == pc) 1 else 2 * pnorm(-root(touch, 1e-6, 12))
  low <- function(r) pt - r * pc - sqrt((pt - t[1])^2 + r^2 * (c[2] - pc)^2)
  high <- function(r) pt - r * pc + sqrt((t[2] - pt)^2 + r^2 * (pc - c[1])^2)
  relative <- if (pc == 0) c("null", "null") else c(
    if (pt == 0) "\"-1\"" else text(root(low, 0, pt / pc) - 1),
    text(root(high, pt / pc, 1e5) - 1)
  )
  named(
    control = listed(c(xc, nc)), variant = listed(c(xt, nt)), confidence = conf,
    wilsonControl = listed(text(c)), wilsonVariant = listed(text(t)),
    low = text(pt - pc - sqrt((pt - t[1])^2 + (c[2] - pc)^2)), high = text(pt - pc + sqrt((t[2] - pt)^2 + (pc - c[1])^2)),
    p = text(p), relativeLow = relative[1], relativeHigh = relative[2]
  )
}

# Ratio of totals: the city data (Cochran's 1920 and 1930 populations). The variance is Cochran 1977, eq. 6.13, without the
# finite population; beside it that of boot's numerical influence values, sum(l^2) / n^2 with n - 1 for one n.
library(boot)
ratio <- function(d) {
  l <- empinf(data = d, statistic = function(d, w) sum(d$x * w) / sum(d$u * w), stype = "w", type = "inf")
  n <- nrow(d)
  named(
    numerator = listed(d$x), denominator = listed(d$u),
    ratio = text(sum(d$x) / sum(d$u)),
    variance = text(sum((d$x - sum(d$x) / sum(d$u) * d$u)^2) / (n * (n - 1) * mean(d$u)^2)),
    influence = text(var.linear(l) * n / (n - 1))
  )
}

fisher <- function(m) named(table = listed(c(m[1, 1], m[1, 2], m[2, 1], m[2, 2])), p = text(fisher.test(m)$p.value))
table2 <- function(a, b, c, d) matrix(c(a, c, b, d), 2)
independence <- function(m) {
  test <- suppressWarnings(chisq.test(m, correct = FALSE))
  named(
    table = listed(apply(m, 1, listed)), chiSquare = text(test$statistic), df = test$parameter, p = text(test$p.value),
    smallestExpected = text(min(test$expected))
  )
}
goodness <- function(x, p) {
  test <- chisq.test(x, p = p, rescale.p = TRUE)
  named(
    counts = listed(x), shares = listed(p), chiSquare = text(test$statistic), df = test$parameter, p = text(test$p.value)
  )
}

extra <- split(sleep$extra, sleep$group)
found <- named(
  welch = listed(c(
    welch(extra[[1]], extra[[2]], 0.95),
    welch(extra[[2]], extra[[1]], 0.9),
    welch(1:10, 7:20, 0.95),
    welch(c(7:20, 200), 1:10, 0.5),
    welch(women$height, c(58.5, 61, 77), 0.99),
    welch(PlantGrowth$weight[1:10], PlantGrowth$weight[21:30], 0.975)
  )),
  shares = listed(c(
    shares(48, 80, 56, 70, 0.95), shares(56, 70, 48, 80, 0.95), shares(3, 10, 9, 10, 0.95), shares(2, 7, 6, 7, 0.95),
    shares(0, 29, 5, 56, 0.95), shares(5, 56, 0, 29, 0.95), shares(0, 20, 0, 10, 0.95), shares(0, 10, 10, 10, 0.99),
    shares(20, 20, 19, 20, 0.95), shares(1, 34, 7, 34, 0.95), shares(112, 842, 6, 22, 0.95), shares(9, 10000, 22, 10000, 0.975),
    shares(3, 1000, 3, 1000, 0.95), shares(1, 18, 7, 18, 0.9)
  )),
  ratio = listed(c(ratio(city), ratio(bigcity))),
  fisher = listed(c(
    fisher(table2(3, 1, 1, 3)), fisher(table2(2, 10, 15, 3)), fisher(table2(0, 50, 20, 30)), fisher(table2(2, 99998, 9, 100001)),
    fisher(table2(0, 16, 15, 57)), fisher(table2(12, 5, 7, 9)), fisher(table2(0, 5, 0, 8)), fisher(table2(700, 1300, 900, 1100)),
    fisher(table2(10, 0, 0, 10))
  )),
  independence = listed(c(
    independence(rbind(c(762, 327, 468), c(484, 239, 477))), independence(table2(3, 1, 1, 3)),
    independence(rbind(c(10, 12, 9), c(100, 80, 130), c(1, 2, 3), c(55, 56, 57))), independence(table2(50000, 49000, 612, 401))
  )),
  goodness = listed(c(
    goodness(c(89, 37, 30, 28, 2), c(40, 20, 20, 15, 5)), goodness(c(5000, 5260), c(1, 1)), goodness(c(5000, 5261), c(1, 1)),
    goodness(c(5000, 5335), c(1, 1)), goodness(c(50087, 47902), c(0.5, 0.5)), goodness(c(9000, 1012), c(9, 1))
  ))
)
cat(gsub("}, {", "},\n{", found, fixed = TRUE), "\n")
