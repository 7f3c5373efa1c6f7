/** Seconds as people say them. */
export function aboutTime(seconds) {
  if (seconds < 90) return `about ${Math.max(1, Math.round(seconds))} s`;
  return `about ${Math.round(seconds / 60)} min`;
}

/**
 * Runs steps one after the other and says before each what it does and how long it and all the rest should take.
 *
 * @param {readonly { name: string, seconds: number, act: (say: (what: string, seconds: number) => void) => Promise<void> }[]} steps
 */
export async function runSteps(steps) {
  for (const [at, step] of steps.entries()) {
    const left = steps.slice(at).reduce((sum, each) => sum + each.seconds, 0);
    console.log(`[${at + 1}/${steps.length}] ${step.name}: ${aboutTime(step.seconds)}; ${aboutTime(left)} left in all`);
    await step.act((what, seconds) => console.log(`      ${what}, ${aboutTime(seconds)}`));
  }
}
