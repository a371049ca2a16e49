# Dunnett's tail and critical values by another road than the one-dimensional integral: the rectangle probability of the
# multivariate normal itself, by Miwa's orthant recursion (Miwa, Hayter and Kuriki 2003). Made with R 4.2.2 and mvtnorm 1.1-3:
#   Rscript test/reference/dunnett.R > test/reference/dunnett-mvtnorm.json
# `off` is how far the tail moves when the recursion's grid is halved: the digits beyond it say nothing.
suppressMessages(library(mvtnorm))

text <- function(x) sprintf("\"%.12g\"", x)
correlation <- function(l) { r <- outer(l, l); diag(r) <- 1; r }
tail <- function(z, l, steps) {
  k <- length(l)
  1 - as.numeric(pmvnorm(rep(-z, k), rep(z, k), corr = correlation(l), algorithm = Miwa(steps = steps)))
}
row <- function(z, l) {
  fine <- tail(z, l, 2048)
  paste0("{\"z\": ", z, ", \"lambdas\": [", paste(l, collapse = ", "), "], \"p\": ", text(fine),
         ", \"off\": ", text(abs(fine - tail(z, l, 1024))), "}")
}
half <- 0.7071067811865476
rows <- c(
  row(2.21, c(half, half)), row(1, c(half, half)), row(3.5, c(half, half)), row(2.35, rep(half, 3)), row(2.44, rep(half, 4)),
  row(2, c(0.3, 0.9)), row(2.2, c(0.95, 0.1, 0.5)), row(1.5, c(0.99, 0.98, 0.4, 0.8)), row(2.7, c(0.5, 0.6, 0.7, 0.8)),
  row(0.2, c(0.2, 0.95))
)
cat("[\n", paste(rows, collapse = ",\n"), "\n]\n", sep = "")
