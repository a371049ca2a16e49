# Adjusted p for test/stats, as p.adjust gives them. Made with R 4.2.2:
#   Rscript test/reference/adjusted-p.R > test/reference/adjusted-p.json
# The first family is that of the documentation, example(p.adjust), rounded as printed there; the second the 15 p-values of
# Benjamini and Hochberg 1995, section 4.1; the others have ties, a missing p, one member, and products above 1.

text <- function(x) ifelse(is.na(x), "null", sprintf("\"%.15g\"", x))
listed <- function(x) paste0("[", paste(text(x), collapse = ", "), "]")
family <- function(name, p) paste0(
  "{\"name\": \"", name, "\", \"p\": ", listed(p), ",\n \"holm\": ", listed(p.adjust(p, "holm")),
  ",\n \"benjaminiHochberg\": ", listed(p.adjust(p, "BH")), "}"
)

set.seed(123)
x <- rnorm(50, mean = c(rep(0, 25), rep(3, 25)))
p <- 2 * pnorm(sort(-abs(x)))
paper <- c(0.0001, 0.0004, 0.0019, 0.0095, 0.0201, 0.0278, 0.0298, 0.0344, 0.0459, 0.3240, 0.4262, 0.5719, 0.6528, 0.7590, 1)
cat("[\n", paste(c(
  family("example(p.adjust)", p), family("Benjamini and Hochberg 1995", paper),
  family("ties, not in order", c(0.04, 0.01, 0.04, 0.2, 0.01, 0.01)),
  family("a missing one", c(0.03, NA, 0.01, 0.02)), family("one", 0.03),
  family("above 1", c(0.9, 0.8, 0.7)), family("far out", c(1e-300, 0.5, 1e-12))
), collapse = ",\n"), "\n]\n", sep = "")
