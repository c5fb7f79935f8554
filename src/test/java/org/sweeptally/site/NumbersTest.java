package org.sweeptally.site;

import static org.assertj.core.api.Assertions.assertThat;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class NumbersTest {

    @ParameterizedTest
    @CsvSource({
        "3, 3", "0.1, 0.1", "-33.525, -33.525", "1e6, 1000000", "1e15, 1000000000000000", "1e16, 1E+16",
        "1e-9, 0.000000001",
        "1e-300, 1E-300", "0, 0", "4.9e-324, 4.9E-324", "1.7976931348623157e308, 1.7976931348623157E+308"
    })
    void aNumberIsWrittenAsOneWould(double value, String text) {
        assertThat(Numbers.parse(Numbers.shortest(value))).hasValue(value);
        assertThat(Numbers.shortest(value)).isEqualTo("4.9E-324".equals(text) ? "5E-324" : text);
    }

    /** Double.toString of any Java release reads back too, so that it may not be shorter. */
    @Test
    void anyNumberReadsBackFromNoMoreDigitsThanJavaNeeds() {
        long seed = 51;
        System.out.println("seed " + seed);
        SplittableRandom random = new SplittableRandom(seed);
        for (int i = 0; i < 50_000; i++) {
            double value = i % 2 == 0 ? random.nextDouble(-200, 200) : Double.longBitsToDouble(random.nextLong());
            if (Double.isNaN(value) || Double.isInfinite(value)) {
                continue;
            }
            String text = Numbers.shortest(value);
            assertThat(Numbers.parse(text)).hasValue(value);
            assertThat(digits(text)).isLessThanOrEqualTo(digits(Double.toString(value)));
        }
    }

    /** Powers of two, and numbers that Double.toString wrote too long before Java 19 (JDK-4511638). */
    @Test
    void nothingShorterReadsBack() {
        for (double value : new double[] {2e23, 1.0e23, 2.2e-322, 0x1p-44, 0x1p-1022, 0x1p900, 9.007199254740993e15}) {
            String text = Numbers.shortest(value);
            int digits = digits(text);
            BigDecimal exact = new BigDecimal(value);
            if (digits > 1) {
                BigDecimal below = exact.round(new MathContext(digits - 1, RoundingMode.DOWN));
                BigDecimal above = exact.round(new MathContext(digits - 1, RoundingMode.UP));
                assertThat(below.doubleValue()).isNotEqualTo(value);
                assertThat(above.doubleValue()).isNotEqualTo(value);
            }
        }
    }

    @Test
    void minusZeroIsZero() {
        assertThat(Numbers.parse("-0.0").getAsDouble()).isEqualTo(0.0);
        assertThat(Double.doubleToRawLongBits(Numbers.parse("-0.0").getAsDouble())).isZero();
    }

    @ParameterizedTest
    @ValueSource(
            strings = {"", "NaN", ".nan", ".inf", "-.inf", "Infinity", "1e999", "0x10", "1_000",
                "1:30", "1,5", "3 m", "1e", "."})
    void whatIsNoDecimalNumberIsNone(String text) {
        assertThat(Numbers.parse(text)).isEmpty();
    }

    private static int digits(String text) {
        return new BigDecimal(text).stripTrailingZeros().precision();
    }
}
