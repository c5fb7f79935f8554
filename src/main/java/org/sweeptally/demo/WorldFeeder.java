package org.sweeptally.demo;

import java.util.Optional;
import java.util.concurrent.TimeUnit;
import org.sweeptally.stream.ClientSettings;
import org.sweeptally.stream.OperatorStoppedException;
import org.sweeptally.stream.PartPublisher;

/** Puts the world's parts on the bus, in the order in which they arrive. */
final class WorldFeeder {

    private final EstuaryWorld world;
    private final ClientSettings clients;
    private final String topic;
    private volatile OperatorStoppedException failure;

    WorldFeeder(EstuaryWorld world, ClientSettings clients, String topic) {
        this.world = world;
        this.clients = clients;
        this.topic = topic;
    }

    /** Everything until the world's end at once; how many parts it was. */
    long feedAll() {
        try (PartPublisher publisher = new PartPublisher(clients, topic)) {
            for (Optional<EstuaryWorld.Sending> next = world.next(); next.isPresent(); next = world.next()) {
                publisher.publish(next.get().part());
            }
            publisher.flush();
            return publisher.published();
        }
    }

    /** Begins to send each part when it is due by the clock, until the thread is interrupted. */
    Thread feedInRealTime() {
        Thread thread = new Thread(this::feedByTheClock, "estuary");
        thread.setDaemon(true);
        thread.start();
        return thread;
    }

    /** Why the feeding has stopped by itself, null while it has not. */
    OperatorStoppedException failure() {
        return failure;
    }

    private void feedByTheClock() {
        try (PartPublisher publisher = new PartPublisher(clients, topic)) {
            for (Optional<EstuaryWorld.Sending> next = world.next(); next.isPresent(); next = world.next()) {
                long wait = next.get().dueMicros() - Demo.nowMicros();
                if (wait > 0) {
                    TimeUnit.MICROSECONDS.sleep(wait);
                }
                publisher.publish(next.get().part());
            }
        } catch (InterruptedException e) {
            Thread.currentThread().interrupt();
        } catch (OperatorStoppedException e) {
            failure = e;
        }
    }
}
