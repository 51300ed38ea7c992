using CsCheck;
using FakeBench.Physics;

namespace FakeBench.Tests.Physics;

/// <summary>The Rosenbrock solver and its elimination on problems whose answers are known.</summary>
public sealed class SolverTests
{
    [Fact]
    public void Local_error_falls_with_the_fifth_power_of_the_step_on_a_nonlinear_forced_problem()
    {
        // y1' = -y1 y2 + sin t, y2' = y1² - y2 t: every coefficient acts, the ones of df/dt too. The reference is the
        // same start with two hundred steps.
        double coarse = ErrorOfOneStep(0.1);
        double fine = ErrorOfOneStep(0.05);

        Assert.InRange(Math.Log2(coarse / fine), 4.6, 5.6);
    }

    [Fact]
    public void Dense_output_is_of_third_order_inside_a_step()
    {
        double coarse = ErrorInsideOneStep(0.1);
        double fine = ErrorInsideOneStep(0.05);

        Assert.InRange(Math.Log2(coarse / fine), 3.6, 4.8);
    }

    [Fact]
    public void A_stiff_decay_is_followed_with_steps_far_above_its_time_constant()
    {
        // y' = -1e9 (y - cos t) - sin t has the solution cos t.
        var solver = new Rodas4(new Stiff(), 1e-6) { NextStep = 1e-3 };
        solver.State[0] = 1;
        while (solver.Time < 10) solver.Advance(10);

        Assert.Equal(Math.Cos(10), solver.State[0], 1e-5);
        Assert.True(solver.Accepted < 2000);
    }

    [Fact]
    public void Elimination_solves_any_diagonally_dominant_system_of_its_pattern() =>
        Gen.Select(Gen.Bool.Array[49], Gen.Double[-1, 1].Array[49], Gen.Double[-5, 5].Array[7])
        .Sample((pattern, values, x) =>
        {
            const int n = 7;
            var matrix = new double[n * n];
            for (int i = 0; i < matrix.Length; i++) matrix[i] = pattern[i] ? values[i] : 0;
            for (int i = 0; i < n; i++) matrix[i * n + i] = 10 + values[i];
            var right = new double[n];
            for (int r = 0; r < n; r++)
            {
                for (int c = 0; c < n; c++) right[r] += matrix[r * n + c] * x[c];
            }

            var elimination = new SparseElimination(pattern, n);
            elimination.Factor(matrix);
            elimination.Solve(matrix, right);
            for (int i = 0; i < n; i++)
            {
                if (Math.Abs(right[i] - x[i]) > 1e-10) return false;
            }

            return true;
        });

    [Fact]
    public void A_state_that_turns_ends_the_step_and_is_followed_by_the_other_equations()
    {
        // y' = -1 while y > 0 and -3 below: from 0.25 it passes 0 at t = 0.25, and is -2.25 at t = 1.
        var solver = new Rodas4(new Bent(), 1e-3) { NextStep = 1 };
        solver.State[0] = 0.25;
        solver.Advance(1);
        Assert.Equal(0.25, solver.Time, 1e-9);
        while (solver.Time < 1) solver.Advance(1);

        Assert.Equal(-2.25, solver.State[0], 1e-9);
        Assert.Equal(2, solver.Accepted);
    }

    [Fact]
    public void Wright_omega_solves_its_equation_everywhere() =>
        Gen.Double[-60, 600].Sample(z =>
        {
            // w + ln w has the slope 1 + 1/w.
            double w = WrightOmega.Of(z);
            return Math.Abs(w + Math.Log(w) - z) < 1e-8 * (1 + w) + 1e-15 * Math.Abs(z);
        }, iter: 20_000);

    [Fact]
    public void Step_ladder_has_four_rungs_an_octave_and_never_rounds_up() =>
        Gen.Double[-14, -6].Sample(power =>
        {
            double step = Math.Pow(10, power);
            double rung = StepLadder.RoundDown(step);
            return rung <= step && rung * 1.1893 > step && StepLadder.RoundDown(rung) == rung;
        });

    private static double ErrorOfOneStep(double step)
    {
        var reference = Solve(1, 1 + step, step / 200);
        var once = Solve(1, 1 + step, step);
        return Math.Abs(once.State[0] - reference.State[0]) + Math.Abs(once.State[1] - reference.State[1]);
    }

    private static double ErrorInsideOneStep(double step)
    {
        var reference = Solve(1, 1 + 0.4 * step, step / 200);
        var once = Solve(1, 1 + step, step);
        var inside = new double[2];
        once.Interpolate(1 + 0.4 * step, inside);
        return Math.Abs(inside[0] - reference.State[0]) + Math.Abs(inside[1] - reference.State[1]);
    }

    private static Rodas4 Solve(double from, double to, double step)
    {
        // A tolerance that is always met: the step is what the test says.
        var solver = new Rodas4(new Forced(), 1e9) { Time = from, LongestStep = step };
        (solver.State[0], solver.State[1]) = (1, 0.5);
        double time = from;
        for (int i = 1; solver.Time < to; i++)
        {
            solver.NextStep = 1;
            time = Math.Min(to, from + i * step);
            solver.Advance(time > to - 1e-9 * step ? to : time);
        }

        return solver;
    }

    private sealed class Forced : IOdeSystem
    {
        public int Size => 2;

        public SparseElimination Elimination { get; } = new([true, true, true, true], 2);

        public ReadOnlySpan<double> Scale => new double[] { 1, 1 };

        public void Evaluate(double time, ReadOnlySpan<double> y, Span<double> dy)
        {
            dy[0] = -y[0] * y[1] + Math.Sin(time);
            dy[1] = y[0] * y[0] - y[1] * time;
        }

        public void Linearise(double time, ReadOnlySpan<double> y, Span<double> dy, Span<double> jacobian,
            Span<double> timeDerivative)
        {
            Evaluate(time, y, dy);
            (jacobian[0], jacobian[1], jacobian[2], jacobian[3]) = (-y[1], -y[0], 2 * y[0], -time);
            (timeDerivative[0], timeDerivative[1]) = (Math.Cos(time), -y[1]);
        }
    }

    private sealed class Bent : IOdeSystem
    {
        private double _rate;

        public int Size => 1;

        public int Turning => 0;

        public SparseElimination Elimination { get; } = new([true], 1);

        public ReadOnlySpan<double> Scale => new double[] { 1 };

        public void Evaluate(double time, ReadOnlySpan<double> y, Span<double> dy) => dy[0] = _rate;

        public void Linearise(double time, ReadOnlySpan<double> y, Span<double> dy, Span<double> jacobian,
            Span<double> timeDerivative)
        {
            _rate = y[0] > 0 ? -1 : -3;
            Evaluate(time, y, dy);
        }
    }

    private sealed class Stiff : IOdeSystem
    {
        public int Size => 1;

        public SparseElimination Elimination { get; } = new([true], 1);

        public ReadOnlySpan<double> Scale => new double[] { 1 };

        public void Evaluate(double time, ReadOnlySpan<double> y, Span<double> dy) =>
            dy[0] = -1e9 * (y[0] - Math.Cos(time)) - Math.Sin(time);

        public void Linearise(double time, ReadOnlySpan<double> y, Span<double> dy, Span<double> jacobian,
            Span<double> timeDerivative)
        {
            Evaluate(time, y, dy);
            jacobian[0] = -1e9;
            timeDerivative[0] = -1e9 * Math.Sin(time) - Math.Cos(time);
        }
    }
}
