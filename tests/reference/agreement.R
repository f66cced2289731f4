# Fixture agreement.json: agreement statistics by R's psych and vcd.
# Run:  Rscript tests/reference/agreement.R > tests/reference/agreement.json
# (Debian: r-cran-psych, r-cran-vcd)
suppressPackageStartupMessages({ library(psych); library(vcd) })

numbers <- function(x) paste0('[', paste(format(x, digits = 12, trim = TRUE), collapse = ', '), ']')
table_of <- function(m) paste0('[', paste(apply(m, 1, numbers), collapse = ', '), ']')

icc_case <- function(m) {
  r <- ICC(m, lmer = FALSE)$results
  # psych lists ICC1, ICC2, ICC3, ICC1k, ICC2k, ICC3k
  names <- c('1,1', '2,1', '3,1', '1,k', '2,k', '3,k')
  rows <- sapply(1:6, function(i) paste0('"', names[i], '": ', numbers(c(r$ICC[i], r[['lower bound']][i], r[['upper bound']][i]))))
  paste0('{"ratings": ', table_of(m), ', "icc": {', paste(rows, collapse = ', '), '}}')
}

# Shrout & Fleiss 1979, Psychol Bull 86:420-428, Table 2
shrout <- matrix(c(9, 2, 5, 8, 6, 1, 3, 2, 8, 4, 6, 8, 7, 1, 2, 6, 10, 5, 6, 9, 6, 2, 4, 7), ncol = 4, byrow = TRUE)
set.seed(5)
angles <- round(outer(rnorm(12, 8, 5), c(0, .6, -.4), '+') + matrix(rnorm(36, 0, 1.2), 12), 2)

kappa_case <- function(m, weights) {
  k <- Kappa(m, weights = weights)
  unweighted <- c(k$Unweighted[['value']], k$Unweighted[['ASE']])
  weighted <- c(k$Weighted[['value']], k$Weighted[['ASE']])
  list(unweighted = unweighted, weighted = weighted)
}
data(SexualFun)
fun <- matrix(as.numeric(SexualFun), nrow = 4)
linear <- kappa_case(fun, 'Equal-Spacing')
quadratic <- kappa_case(fun, 'Fleiss-Cohen')

cat('{\n"icc": [\n', icc_case(shrout), ',\n', icc_case(angles), '\n],\n', sep = '')
cat('"kappa": {"counts": ', table_of(fun), ',\n"none": ', numbers(linear$unweighted), ', "linear": ', numbers(linear$weighted),
  ', "quadratic": ', numbers(quadratic$weighted), '}\n}\n', sep = '')
