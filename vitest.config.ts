import { availableParallelism } from 'node:os';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vitest/config';

export default defineConfig({
  plugins: [react()],
  test: {
    // Every core, which the runner would leave one of idle; more than eight would ask PostgreSQL for too many connections.
    maxWorkers: Math.min(availableParallelism(), 8),
    projects: [
      {
        extends: true,
        test: {
          name: 'engine',
          environment: 'node',
          // What these test is pure, so one file can't leave anything behind for the next: modules are loaded once for all.
          isolate: false,
          // Properties on generated designs take seconds on a machine that does other work.
          testTimeout: 30_000,
          include: ['tests/{engine,drawing,contract,reference,layout,golden}/**/*.test.ts'],
        },
      },
      {
        extends: true,
        test: {
          name: 'server',
          environment: 'node',
          include: ['tests/server/**/*.test.ts'],
          globalSetup: ['tests/support/postgres-template.ts'],
          testTimeout: 30_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'kernel',
          environment: 'node',
          include: ['tests/kernel/**/*.test.ts'],
          globalSetup: ['tests/kernel/say-what-lacks.ts'],
          // A storm takes the whole machine for a moment.
          fileParallelism: false,
          testTimeout: 60_000,
          hookTimeout: 60_000,
        },
      },
      {
        extends: true,
        test: {
          name: 'client',
          environment: 'jsdom',
          testTimeout: 30_000,
          include: ['tests/{app,canvas,components,features,lib,pages,workspace}/**/*.test.{ts,tsx}'],
          setupFiles: ['tests/support/jsdom.ts'],
        },
      },
      {
        extends: true,
        test: {
          name: 'e2e',
          environment: 'node',
          include: ['tests/e2e/**/*.test.ts'],
          globalSetup: ['tests/support/running-application.ts'],
          // Each file has designs of its own; more browsers than two would wait for one another.
          maxWorkers: 2,
          testTimeout: 90_000,
          hookTimeout: 120_000,
          // A pointer can miss what still glides on a machine that is busy; a fault fails twice.
          retry: 1,
          // What a person would wait for, on a machine that is busy.
          expect: { poll: { timeout: 10_000 } },
        },
      },
    ],
  },
});
