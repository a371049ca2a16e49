# Boundaries of planned looks by two other roads, made with R 4.2.2:
#   Rscript test/reference/looks.R > test/reference/looks.json
# rpact 3.3.4 (Debian's r-cran-rpact), a package for the design of clinical trials, by numerical integration of its own: alpha
# spending of the O'Brien-Fleming type (asOF) and of the Pocock type (asP), and the constants of O'Brien and Fleming 1979 (OF)
# and Pocock 1977 (P) themselves, two-sided, symmetric.
# mvtnorm 1.1-3: the rectangle probability of the multivariate normal itself, by Miwa's orthant recursion, and a root of it, also
# for looks of which the last is not at the whole size and spends what is left.
suppressMessages({library(rpact); library(mvtnorm)})

text <- function(x) paste0("[", paste(sprintf("\"%.9g\"", x), collapse = ", "), "]")
design <- function(type, shares, alpha) {
  found <- getDesignGroupSequential(kMax = length(shares), informationRates = shares, alpha = alpha, sided = 2,
                                    typeOfDesign = type, tolerance = 1e-10)$criticalValues
  paste0("{\"by\": \"rpact\", \"type\": \"", type, "\", \"shares\": [", paste(shares, collapse = ", "), "], \"alpha\": ", alpha,
         ", \"boundaries\": ", text(found), "}")
}
spent <- function(type, alpha, t) {
  if (type == "asOF") 2 - 2 * pnorm(qnorm(1 - alpha / 4) / sqrt(t)) else alpha / 2 * log(1 + (exp(1) - 1) * t)
}
upper <- function(c, before, shares) {
  k <- length(before) + 1
  r <- outer(shares[1:k], shares[1:k], function(s, t) sqrt(pmin(s, t) / pmax(s, t)))
  if (k == 1) return(pnorm(-c))
  as.numeric(pmvnorm(c(-before, c), c(before, 12), corr = r, algorithm = Miwa(steps = 1024)))
}
solved <- function(type, shares, alpha, last) {
  found <- c(); so.far <- 0
  for (k in seq_along(shares)) {
    allowed <- if (last && k == length(shares)) alpha / 2 else spent(type, alpha, min(1, shares[k]))
    found <- c(found, uniroot(function(c) upper(c, found, shares) - (allowed - so.far), c(0.5, 9), tol = 1e-10)$root)
    so.far <- allowed
  }
  paste0("{\"by\": \"mvtnorm\", \"type\": \"", type, "\", \"shares\": [", paste(shares, collapse = ", "), "], \"alpha\": ", alpha,
         ", \"last\": ", tolower(last), ", \"boundaries\": ", text(found), "}")
}
five <- (1:5) / 5
quarters <- (1:4) / 4
rows <- c(
  design("asOF", five, 0.05), design("asP", five, 0.05), design("asOF", quarters, 0.05), design("asP", quarters, 0.05),
  design("asOF", c(0.1, 0.45, 0.9, 1), 0.01), design("asP", c(0.05, 0.3, 0.31, 1), 0.1), design("asOF", (1:10) / 10, 0.025),
  design("OF", five, 0.05), design("P", five, 0.05), design("OF", quarters, 0.01), design("P", (1:10) / 10, 0.1),
  solved("asOF", c(0.3, 0.55, 0.9), 0.05, TRUE), solved("asP", c(0.3, 0.55, 1.15), 0.05, TRUE),
  solved("asP", c(0.2, 0.64), 0.02, FALSE), solved("asOF", c(0.4, 0.5, 0.58), 0.05, FALSE)
)
cat("[\n", paste(rows, collapse = ",\n"), "\n]\n", sep = "")
