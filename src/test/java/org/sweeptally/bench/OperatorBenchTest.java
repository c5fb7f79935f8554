package org.sweeptally.bench;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.Arrays;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.stream.BenchBus;

/** Keeps {@link OperatorBench} from rotting: it runs, small, and what comes out is printed and looked at. */
class OperatorBenchTest {

    @TempDir
    private Path folder;

    @Test
    void floorsAndOperatorMakeACountOfEveryScanInEveryRegion() throws Exception {
        OperatorBench bench = new OperatorBench(folder);
        OperatorBench.Load load = new OperatorBench.Load(2, 3, 5, 1, 40);
        for (OperatorBench.Kind kind : OperatorBench.Kind.values()) {
            double partsPerSecond = bench.throughput(kind, load);
            System.out.println("operator bench, 40 scans of 5, digest of a part " + digest() + ": " + kind + " "
                    + partsPerSecond + " parts/s");
            assertThat(partsPerSecond).isPositive();
        }
    }

    @Test
    void aSecondStartSaysHowLongTheTailWas() throws Exception {
        List<OperatorBench.Recovered> recovered = new OperatorBench(folder).recovery(5, 30);
        System.out.println("operator bench, recovery after 30 scans: " + recovered);
        assertThat(recovered).extracting(OperatorBench.Recovered::partition).containsExactlyInAnyOrder(0, 1);
        assertThat(recovered).allSatisfy(partition -> assertThat(partition.entries()).isGreaterThanOrEqualTo(30));
    }

    private static int digest() {
        return Arrays.hashCode(Wire.encode(new BenchScans(50, List.of(BenchBus.sensor(0)), 1).next(0, 2.5)));
    }
}
