# Quantiles of two arms for test/stats. Made with R 4.2.2:
#   Rscript test/reference/quantile.R > test/reference/quantile.json
# Quantiles by quantile(type = 1); interval, relative interval and p from their definitions on the sorted values: p by
# walking over every z at which a rank changes, the relative ends by root finding.

text <- function(x) ifelse(is.na(x), "null", sprintf("\"%.15g\"", x))
listed <- function(x) paste0("[", paste(x, collapse = ", "), "]")
named <- function(...) { x <- list(...); paste0("{", paste0("\"", names(x), "\": ", unlist(x), collapse = ", "), "}") }
h <- function(n, q) sqrt(n * q * (1 - q))
value <- function(x, rank) if (rank < 1 || rank > length(x)) NA else sort(x)[rank]
low <- function(x, q, z) value(x, floor(length(x) * q - z * h(length(x), q) + 1e-9))
high <- function(x, q, z) value(x, ceiling(length(x) * q + z * h(length(x), q) - 1e-9))

contrast <- function(name, control, variant, q, alpha) {
  z <- qnorm(1 - alpha / 2)
  c <- unname(quantile(control, q, type = 1))
  t <- unname(quantile(variant, q, type = 1))
  lc <- low(control, q, z); uc <- high(control, q, z); lt <- low(variant, q, z); ut <- high(variant, q, z)
  d <- t - c

  falling <- if (d > 0) variant else control
  rising <- if (d > 0) control else variant
  nf <- length(falling); nr <- length(rising)
  jumps <- sort(c(0, (nf * q - 0:floor(nf * q)) / h(nf, q), (ceiling(nr * q):nr - nr * q) / h(nr, q)))
  excluded <- function(z) {
    l <- low(falling, q, z); u <- high(rising, q, z)
    !is.na(l) && !is.na(u) && (max(c, t) - l)^2 + (u - min(c, t))^2 < d^2 - 1e-12
  }
  after <- jumps[!sapply(jumps + 1e-7, excluded)]
  p <- if (d == 0) 1 else 2 * pnorm(-max(0, after[1]))

  side <- function(r, half, other) if (r >= 0) half else other
  lower <- function(r) t - r * c - sqrt((t - lt)^2 + r^2 * side(r, uc - c, c - lc)^2)
  upper <- function(r) t - r * c + sqrt((ut - t)^2 + r^2 * side(r, c - lc, uc - c)^2)
  root <- function(f, a, b) uniroot(f, c(a, b), tol = 1e-15, maxiter = 10000)$root - 1
  exists <- c > 0 && !is.na(lc) && lc > 0
  named(
    name = paste0("\"", name, "\""), q = paste0("\"", q, "\""), alpha = alpha, control = listed(control), variant = listed(variant),
    ofControl = text(c), ofVariant = text(t), low = text(d - sqrt((t - lt)^2 + (uc - c)^2)),
    high = text(d + sqrt((ut - t)^2 + (c - lc)^2)), p = text(p),
    relative = if (!exists) "null" else named(
      estimate = text(t / c - 1),
      low = if (is.na(lt) || is.na(uc)) "null" else text(root(lower, -100, t / c)),
      high = if (is.na(ut)) "null" else text(root(upper, t / c, 1000))
    )
  )
}
spray <- split(InsectSprays$count, InsectSprays$spray)
chicks <- split(chickwts$weight, chickwts$feed)
teeth <- split(ToothGrowth$len, ToothGrowth$supp)
far <- split(quakes$stations, quakes$long > 175)
extra <- split(sleep$extra, sleep$group)
cat("[\n", paste(c(
  contrast("InsectSprays C, A", spray$C, spray$A, 0.5, 0.05), contrast("InsectSprays A, C", spray$A, spray$C, 0.5, 0.05),
  contrast("InsectSprays A, B", spray$A, spray$B, 0.5, 0.05), contrast("chickwts linseed, casein", chicks$linseed, chicks$casein, 0.5, 0.1),
  contrast("chickwts soybean, sunflower", chicks$soybean, chicks$sunflower, 0.25, 0.2), contrast("ToothGrowth OJ, VC", teeth$OJ, teeth$VC, 0.5, 0.05),
  contrast("ToothGrowth OJ, VC", teeth$OJ, teeth$VC, 0.9, 0.05), contrast("ToothGrowth VC, OJ", teeth$VC, teeth$OJ, 0.1, 0.05),
  contrast("quakes stations by longitude", far$`TRUE`, far$`FALSE`, 0.5, 0.05), contrast("quakes stations by longitude", far$`FALSE`, far$`TRUE`, 0.95, 0.05),
  contrast("quakes stations by longitude", far$`TRUE`, far$`FALSE`, 0.99, 0.01), contrast("sleep", extra[[1]], extra[[2]], 0.5, 0.1),
  contrast("sleep less 5 against chicks", chicks$linseed, extra[[1]] - 5, 0.5, 0.1), contrast("sleep against linseed", chicks$linseed, extra[[1]], 0.5, 0.1)
), collapse = ",\n"), "\n]\n", sep = "")

# Conover's tubes: P(Y <= 8) and P(Y >= 15) of Binomial(16, 0.75) are what [X(9), X(15)] misses.
message("Conover: ", 1 - pbinom(8, 16, 0.75) - (1 - pbinom(14, 16, 0.75)))
