import type { StudyPlan } from '#analysis/study/study-plan.ts';

/** An R script that reproduces the run's numbers from `analysis.csv` with base R alone. */
export function rScript(plan: StudyPlan): string {
  const outcomes = [plan.primary, ...plan.secondary];
  return `# Reproduces the numbers of this export with base R (tried on R 4.2).
# Run it in this folder: Rscript analysis.R
# For research under an approved protocol; not for diagnosis or treatment.

stop_if_changed <- function() {
  sums <- read.csv("checksums.csv", stringsAsFactors = FALSE)
  for (i in seq_len(nrow(sums))) {
    if (unname(tools::md5sum(sums$file[i])) != sums$md5[i]) stop("changed since the export: ", sums$file[i])
  }
}
stop_if_changed()

data <- read.csv("analysis.csv", stringsAsFactors = FALSE)
expected <- read.csv("expected.csv", stringsAsFactors = FALSE)
confidence <- ${plan.confidence}
outcomes <- c(${outcomes.map((outcome) => JSON.stringify(outcome)).join(', ')})

${bodyOf(plan)}

results <- do.call(rbind, lapply(outcomes, effect))
print(results, digits = 10)

for (i in seq_len(nrow(expected))) {
  row <- results[results$outcome == expected$outcome[i], ]
  for (column in c("estimate", "lower", "upper", "p_value")) {
    difference <- abs(row[[column]] - expected[[column]][i])
    if (difference > 1e-8 * abs(expected[[column]][i]) + 1e-12) {
      stop(sprintf("%s of %s: R gives %.12g, the run %.12g", column, row$outcome, row[[column]], expected[[column]][i]))
    }
  }
}
cat("All numbers agree with the run.\\n")
`;
}

function bodyOf(plan: StudyPlan): string {
  const [x = '', y = ''] = plan.conditions ?? [];
  if (plan.method === 'crossover_2x2') {
    return `# 2x2 crossover: half the difference of the period differences between the two orders, pooled variance.
x <- ${JSON.stringify(x)}
effect <- function(outcome) {
  column <- paste0("log_change_", outcome)
  wide <- reshape(data[, c("participant", "period", "condition", column)], idvar = "participant",
                  timevar = "period", direction = "wide")
  difference <- wide[[paste0(column, ".1")]] - wide[[paste0(column, ".2")]]
  first_x <- wide$condition.1 == x
  test <- t.test(difference[first_x] / 2, difference[!first_x] / 2, var.equal = TRUE, conf.level = confidence)
  data.frame(outcome = outcome, estimate = unname(test$estimate[1] - test$estimate[2]), lower = test$conf.int[1],
             upper = test$conf.int[2], p_value = test$p.value)
}`;
  }
  if (plan.method === 'ancova_change') {
    return `# Change from baseline between groups: analysis of covariance of the logarithms.
x <- ${JSON.stringify(x)}
y <- ${JSON.stringify(y)}
effect <- function(outcome) {
  d <- data.frame(after = log(data[[paste0(outcome, "_after")]]), before = log(data[[paste0(outcome, "_before")]]),
                  group = factor(data$condition, levels = c(y, x)))
  d <- d[!is.na(d$group), ]
  fit <- lm(after ~ before + group, data = d)
  name <- paste0("group", x)
  interval <- confint(fit, level = confidence)[name, ]
  data.frame(outcome = outcome, estimate = unname(coef(fit)[name]), lower = interval[[1]], upper = interval[[2]],
             p_value = summary(fit)$coefficients[name, 4])
}`;
  }
  return `# Paired comparison of the logarithms after and before.
effect <- function(outcome) {
  test <- t.test(log(data[[paste0(outcome, "_after")]]), log(data[[paste0(outcome, "_before")]]), paired = TRUE,
                 conf.level = confidence)
  data.frame(outcome = outcome, estimate = unname(test$estimate), lower = test$conf.int[1],
             upper = test$conf.int[2], p_value = test$p.value)
}`;
}
