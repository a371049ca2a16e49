# Adjusted contrasts for test/stats, on data sets that come with R (package datasets). Made with R 4.2.2:
#   Rscript test/reference/covariate.R > test/reference/covariate.json
# theta from var() and cov() of each arm; difference, its standard error, df and interval from t.test() on y - theta (x - X);
# (normal quantile from 200 units an arm on); slope and effect also from lm(): with arms of one slope those of y ~ arm + x, with x of one variance in both arms those of
# y ~ arm * (x - X), the slope then being the mean of both, each weighted with the other arm's share.

options(digits = 17)
text <- function(x) sprintf("\"%.15g\"", x)
numbers <- function(x) paste0("[", paste(ifelse(is.na(x), "null", format(x, digits = 15, trim = TRUE)), collapse = ", "), "]")
named <- function(...) { x <- list(...); paste0("{", paste0("\"", names(x), "\": ", unlist(x), collapse = ", "), "}") }
g1 <- function(d) { e <- d - mean(d); mean(e^3) / mean(e^2)^1.5 }
g2 <- function(d) { e <- d - mean(d); mean(e^4) / mean(e^2)^2 - 3 }
arm_text <- function(d) named(mean = text(mean(d)), sd = text(sd(d)), skewness = text(g1(d)), kurtosis = text(g2(d)))

case <- function(name, y, x, variant, method, regression) {
  X <- mean(x, na.rm = TRUE)
  w <- ifelse(is.na(x), X, x)
  nt <- sum(variant); nc <- sum(!variant)
  theta <- (cov(y[variant], w[variant]) / nt + cov(y[!variant], w[!variant]) / nc) /
    (var(w[variant]) / nt + var(w[!variant]) / nc)
  d <- y - theta * (w - X)
  t <- t.test(d[variant], d[!variant])
  v <- var(d[variant]) / nt + var(d[!variant]) / nc
  plain <- var(y[variant]) / nt + var(y[!variant]) / nc
  # Normal from 200 units an arm on, and for shares; Fieller at the same quantile, as the quadratic in r
  welch <- method == "welch"
  q <- if (welch) qt(0.975, t$parameter) else qnorm(0.975)
  mt <- mean(d[variant]); mc <- mean(d[!variant]); vt <- var(d[variant]) / nt; vc <- var(d[!variant]) / nc
  a <- mc^2 - q^2 * vc; b <- mt * mc; c <- mt^2 - q^2 * vt
  root <- sqrt(b^2 - a * c)
  lm_slope <- NA; lm_effect <- NA
  if (regression == "common") {
    fit <- coef(lm(y ~ variant + w)); lm_slope <- fit[["w"]]; lm_effect <- fit[["variantTRUE"]]
  }
  if (regression == "interacted") {
    centred <- w - X; fit <- coef(lm(y ~ variant * centred))
    lm_slope <- fit[["centred"]] + fit[["variantTRUE:centred"]] * nc / (nc + nt); lm_effect <- fit[["variantTRUE"]]
  }
  named(name = paste0("\"", name, "\""), y = numbers(y), x = numbers(x), variant = numbers(as.integer(variant)),
    theta = text(theta), meanOfX = text(X), varianceReduction = text(1 - v / plain),
    estimate = text(mt - mc), standardError = text(t$stderr), method = paste0("\"", method, "\""),
    low = text(mt - mc - q * t$stderr), high = text(mt - mc + q * t$stderr),
    p = text(if (welch) t$p.value else 2 * pnorm(-abs(t$statistic))),
    relative = text(mt / mc - 1), relativeLow = text((b - root) / a - 1), relativeHigh = text((b + root) / a - 1),
    slope = if (is.na(lm_slope)) "null" else text(lm_slope), effect = if (is.na(lm_effect)) "null" else text(lm_effect),
    control = arm_text(d[!variant]), treated = arm_text(d[variant]))
}

# Chicks of diet 1 and 3 on day 21, and the same chick at birth: 16 against 10.
chicks <- merge(subset(ChickWeight, Time == 21 & Diet %in% c(1, 3)), subset(ChickWeight, Time == 0), by = "Chick")
y <- chicks$weight.x; x <- chicks$weight.y; three <- chicks$Diet.x == 3

# The same with diet 3's chicks moved to the slope of diet 1; and with their x spread to the variance of diet 1.
slope <- cov(y[!three], x[!three]) / var(x[!three])
own <- cov(y[three], x[three]) / var(x[three])
straight <- round(ifelse(three, y + (slope - own) * (x - 41), y), 9)
spread <- round(ifelse(three, 41 + (x - mean(x[three])) * sd(x[!three]) / sd(x[three]), x), 9)

# Temperature in New York, May to July against August and September, and ozone, missing on 37 days of 153.
late <- airquality$Month >= 8

# Earthquakes near Fiji: stations that reported one and its magnitude, deep ones against the others.
deep <- quakes$depth > 300

cat("[\n", paste(c(
  case("chicks", y, x, three, "welch", ""),
  case("chicks of one slope", straight, x, three, "welch", "common"),
  case("chicks of one spread of x", y, spread, three, "welch", "interacted"),
  case("ozone missing", airquality$Temp, airquality$Ozone, late, "welch", ""),
  case("earthquakes", quakes$stations, quakes$mag, deep, "normal", ""),
  case("share of earthquakes with over 40 stations", as.integer(quakes$stations > 40), quakes$mag, deep, "normal", "")
), collapse = ",\n"), "\n]\n", sep = "")
