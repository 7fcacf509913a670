import { testFixtures } from '../support/test-fixtures';

testFixtures('typescript', 2, 3);
