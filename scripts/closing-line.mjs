/** A test reporter that ends the run with one plain line, `N passed, N failed`, for whoever reads the log by machine. */
export default class ClosingLine {
  onTestRunEnd(modules, errors) {
    const count = { passed: 0, failed: 0, skipped: 0, pending: 0 };
    for (const module of modules) {
      let tests = 0;
      for (const test of module.children.allTests()) {
        count[test.result().state]++;
        tests++;
      }
      // a file that cannot even be loaded is a failure that no test stands for
      if (tests === 0 && module.state() === 'failed') count.failed++;
    }
    const line = `${count.passed} passed, ${count.failed + errors.length} failed${count.skipped > 0 ? `, ${count.skipped} skipped` : ''}`;
    process.once('exit', () => process.stdout.write(`${line}\n`));
  }
}
