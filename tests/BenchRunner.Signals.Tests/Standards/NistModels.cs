namespace BenchRunner.Signals.Tests.Standards;

/// <summary>A model at x, with its derivatives along the parameters.</summary>
internal delegate double NistModel(ReadOnlySpan<double> b, double x, Span<double> derivatives);

/// <summary>The models of the sets, each with derivatives worked out by hand.</summary>
internal static class NistModels
{
    public static NistModel Of(string set) => set switch
    {
        "Misra1a" or "BoxBOD" => Saturation,
        "DanWood" => Power,
        "Eckerle4" => Bell,
        "Gauss1" => TwoBells,
        "Lanczos1" or "Lanczos3" => ThreeDecays,
        "MGH09" => Quadratics,
        "Rat43" => Growth,
        "Thurber" => Cubics,
        _ => Polynomial,
    };

    private static double Saturation(ReadOnlySpan<double> b, double x, Span<double> d)
    {
        double decay = Math.Exp(-b[1] * x);
        d[0] = 1 - decay;
        d[1] = b[0] * x * decay;
        return b[0] * d[0];
    }

    private static double Power(ReadOnlySpan<double> b, double x, Span<double> d)
    {
        d[0] = Math.Pow(x, b[1]);
        d[1] = b[0] * d[0] * Math.Log(x);
        return b[0] * d[0];
    }

    private static double Bell(ReadOnlySpan<double> b, double x, Span<double> d)
    {
        double z = (x - b[2]) / b[1];
        double bell = Math.Exp(-0.5 * z * z) / b[1];
        d[0] = bell;
        d[1] = b[0] * bell * ((z * z) - 1) / b[1];
        d[2] = b[0] * bell * z / b[1];
        return b[0] * bell;
    }

    private static double TwoBells(ReadOnlySpan<double> b, double x, Span<double> d)
    {
        d[0] = Math.Exp(-b[1] * x);
        d[1] = -b[0] * x * d[0];
        double y = b[0] * d[0];
        for (int k = 2; k < 8; k += 3)
        {
            double z = (x - b[k + 1]) / b[k + 2];
            d[k] = Math.Exp(-z * z);
            d[k + 1] = 2 * b[k] * d[k] * z / b[k + 2];
            d[k + 2] = z * d[k + 1];
            y += b[k] * d[k];
        }

        return y;
    }

    private static double ThreeDecays(ReadOnlySpan<double> b, double x, Span<double> d)
    {
        double y = 0;
        for (int k = 0; k < 6; k += 2)
        {
            d[k] = Math.Exp(-b[k + 1] * x);
            d[k + 1] = -b[k] * x * d[k];
            y += b[k] * d[k];
        }

        return y;
    }

    private static double Quadratics(ReadOnlySpan<double> b, double x, Span<double> d)
    {
        double above = (x * x) + (x * b[1]), below = (x * x) + (x * b[2]) + b[3];
        d[0] = above / below;
        d[1] = b[0] * x / below;
        d[3] = -b[0] * above / (below * below);
        d[2] = x * d[3];
        return b[0] * d[0];
    }

    private static double Growth(ReadOnlySpan<double> b, double x, Span<double> d)
    {
        double rise = Math.Exp(b[1] - (b[2] * x));
        d[0] = Math.Pow(1 + rise, -1 / b[3]);
        double y = b[0] * d[0];
        d[1] = -y / b[3] * rise / (1 + rise);
        d[2] = -x * d[1];
        d[3] = y * Math.Log(1 + rise) / (b[3] * b[3]);
        return y;
    }

    private static double Cubics(ReadOnlySpan<double> b, double x, Span<double> d)
    {
        double above = b[0] + (x * (b[1] + (x * (b[2] + (x * b[3])))));
        double below = 1 + (x * (b[4] + (x * (b[5] + (x * b[6])))));
        double power = 1;
        for (int k = 0; k < 4; k++, power *= x)
        {
            d[k] = power / below;
        }

        for (int k = 4; k < 7; k++)
        {
            d[k] = -above / below * d[k - 3];
        }

        return above / below;
    }

    private static double Polynomial(ReadOnlySpan<double> b, double x, Span<double> d)
    {
        double y = 0, power = 1;
        for (int k = 0; k < b.Length; k++, power *= x)
        {
            d[k] = power;
            y += b[k] * power;
        }

        return y;
    }
}
