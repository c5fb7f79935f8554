package org.sweeptally.stream.attack;

import java.util.List;
import java.util.Optional;
import java.util.TreeMap;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.TimeUnit;
import org.apache.kafka.clients.producer.KafkaProducer;
import org.apache.kafka.clients.producer.ProducerRecord;
import org.sweeptally.demo.EstuaryWorld;
import org.sweeptally.event.Part;
import org.sweeptally.event.SensorPromise;
import org.sweeptally.region.wire.Wire;
import org.sweeptally.site.Site;

/**
 * The sensors of the invented estuary, who know nothing of the operator's troubles: they send on, several times as fast
 * as in life, until they are told to end, and then promise that nothing more will come.
 */
final class Feeder implements AutoCloseable {

    static final long BEGIN_MICROS = 1_935_374_400_000_000L; // 2031-05-01T04:00:00Z

    private final Site site;
    private final String topic;
    private final EstuaryWorld world;
    private volatile double speed;
    private final KafkaProducer<byte[], byte[]> producer;
    private final TreeMap<String, Long> latestScans = new TreeMap<>();
    private final CompletableFuture<Void> done = new CompletableFuture<>();
    private final Thread thread = new Thread(this::run, "feeder");
    private volatile long worldMicros = BEGIN_MICROS;
    private volatile boolean ending;

    /**
     * @param seed  of the world
     * @param speed world seconds in a second
     */
    Feeder(Site site, String topic, long seed, double speed) {
        this.site = site;
        this.topic = topic;
        this.world = new EstuaryWorld(site, seed, BEGIN_MICROS, Double.POSITIVE_INFINITY);
        this.speed = speed;
        this.producer = new KafkaProducer<>(Bus.clients().producer(topic + "-feeder"));
        this.thread.setDaemon(true);
    }

    Feeder start() {
        thread.start();
        return this;
    }

    /** The estuary's time so far, microseconds since 1970-01-01T00:00:00Z. */
    long worldMicros() {
        return worldMicros;
    }

    /** Waits until the estuary's time is beyond another, so that what is to happen there has happened. */
    void passes(long micros) throws InterruptedException {
        while (worldMicros <= micros && !done.isDone()) {
            Thread.sleep(10);
        }
    }

    /** Sends what is left until a time of the estuary as fast as the bus takes it, and ends. */
    void hurryTo(long micros) throws InterruptedException {
        speed = Double.POSITIVE_INFINITY;
        passes(micros);
        end();
    }

    /** Lets the sensors promise and stop; returns when all that they said is on the bus. */
    void end() {
        ending = true;
        done.orTimeout(60, TimeUnit.SECONDS).join();
    }

    private void run() {
        try {
            feed();
            promiseEnds();
            producer.flush();
            done.complete(null);
        } catch (InterruptedException | RuntimeException e) {
            done.completeExceptionally(e);
        }
    }

    private void feed() throws InterruptedException {
        long begin = System.nanoTime();
        Optional<EstuaryWorld.Sending> next = world.next();
        while (next.isPresent() && !ending) {
            long due = begin + (long) ((next.get().dueMicros() - BEGIN_MICROS) * 1000 / speed);
            TimeUnit.NANOSECONDS.sleep(due - System.nanoTime());
            send(next.get().part());
            worldMicros = next.get().dueMicros();
            world.forgetBefore(worldMicros);
            next = world.next();
        }
    }

    private void promiseEnds() {
        for (var sensor : site.sensors()) {
            long interval = Math.round(sensor.intervalSeconds() * 1e6);
            send(Part.newBuilder()
                    .setSensor(sensor.name())
                    .setScanTimeMicros(latestScans.getOrDefault(sensor.name(), BEGIN_MICROS) + interval)
                    .setPart(0)
                    .setClosesScan(true)
                    .setPromise(new SensorPromise((Long) null))
                    .setDetections(List.of())
                    .build());
        }
    }

    /** Each sensor on a partition of its own choice, as long as it is always the same. */
    private void send(Part part) {
        latestScans.merge(part.getSensor(), part.getScanTimeMicros(), Math::max);
        producer.send(new ProducerRecord<>(topic, partition(site, part.getSensor()), null, Wire.encode(part)),
                (at, e) -> {
                    if (e != null) {
                        done.completeExceptionally(e);
                    }
                });
    }

    static int partition(Site site, String sensor) {
        int place = site.sensors().stream().map(s -> s.name()).toList().indexOf(sensor);
        return place % AttackedSite.DETECTION_PARTITIONS;
    }

    @Override
    public void close() {
        ending = true;
        thread.interrupt();
        producer.close();
    }
}
